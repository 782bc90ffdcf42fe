import { describe, expect, it } from 'vitest';
import { failedWords } from '../../words/jobs-sentences';
import { AppError } from '../errors';
import { failureOf } from './recorded';

const withCode = (code: string, message = 'x'): Error => Object.assign(new Error(message), { code });

describe('why a job failed', () => {
  it('is told by what was thrown', () => {
    expect(failureOf(new Error('Knex: Timeout acquiring a connection. The pool is probably full.'))).toBe(
      'away',
    );
    expect(failureOf(withCode('ECONNREFUSED'))).toBe('away');
    expect(failureOf(withCode('55P03'))).toBe('locked');
    expect(failureOf(withCode('40P01'))).toBe('locked');
    expect(failureOf(withCode('57014'))).toBe('too_long');
    expect(failureOf(withCode('53100'))).toBe('full');
    expect(failureOf(new AppError('conflict', { message: 'Somebody was first.' }))).toBe('said');
    expect(failureOf(new TypeError('x is undefined'))).toBe('unforeseen');
    expect(failureOf('text')).toBe('unforeseen');
  });

  it('is a sentence; only what nobody foresaw is quoted, and what was written for people', () => {
    const said = 'Knex: Timeout acquiring a connection';
    for (const why of ['locked', 'too_long', 'full', 'away'] as const) {
      expect(failedWords(why, said)).not.toContain('Knex');
      expect(failedWords(why, said)).toMatch(/^[A-Z].*\.$/);
    }
    expect(failedWords('unforeseen', 'x is undefined')).toContain('"x is undefined"');
    expect(failedWords('said', 'Somebody was first.')).toBe('Somebody was first.');
  });
});
