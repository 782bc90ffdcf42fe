import { describe, expect, it } from 'vitest';
import type { LetterItem, LettersPage } from '../../schemas/api/letters';
import { lettersFinding } from './Letters';

const AT = '2026-12-01T12:00:00.000Z';
const letter = (more: Partial<LetterItem> = {}): LetterItem => ({
  ref: '00000000-0000-4000-8000-000000000001',
  kind: 'handover',
  to: 'a@b.example',
  subject: 'Papers',
  createdAt: AT,
  sentAt: AT,
  givenUpAt: null,
  notBefore: AT,
  attempts: 1,
  lastError: null,
  received: null,
  ...more,
});
const page = (letters: LetterItem[], more: Partial<LettersPage> = {}): LettersPage => ({
  at: AT,
  sending: true,
  localPost: false,
  letters,
  ...more,
});

describe('the heading of the letters', () => {
  it.each<[LettersPage, string]>([
    [page([]), 'No letter has been written'],
    [page([letter()]), 'Every letter has been sent'],
    [page([letter({ sentAt: null })]), '1 letter waits to be sent'],
    [
      page([letter({ sentAt: null }), letter({ sentAt: null })], { sending: false }),
      '2 letters wait: no mail server is set',
    ],
    [page([letter(), letter({ sentAt: null, givenUpAt: AT })]), '1 letter was given up'],
  ])('%#', (shown, words) => {
    expect(lettersFinding(shown).finding.replaceAll('\u00a0', ' ')).toBe(words);
  });
});
