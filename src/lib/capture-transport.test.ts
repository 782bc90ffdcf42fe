import { describe, expect, it } from 'vitest';
import { ApiError } from './api';
import { answerOf } from './capture-transport';

const error = (
  status: number,
  some: { fields?: { field: string; message: string }[]; after?: number; current?: unknown } = {},
) =>
  new ApiError(status, 'Title', 'Message', some.fields ?? [], null, some.after ?? null, some.current ?? null);

describe('what an answer of the server means for a record that waits', () => {
  it('no answer, or one that was cut off, says nothing: it goes again', () => {
    expect(answerOf(error(0)).kind).toBe('unreachable');
    expect(answerOf(new DOMException('timed out', 'TimeoutError')).kind).toBe('unreachable');
    expect(answerOf(new SyntaxError('half a body')).kind).toBe('unreachable');
  });
  it('a fault of the server’s own, or too many requests, goes again later', () => {
    for (const status of [408, 425, 500, 502, 503, 504])
      expect(answerOf(error(status))).toEqual({ kind: 'busy', retryAfterS: null });
    expect(answerOf(error(429, { after: 30 }))).toEqual({ kind: 'busy', retryAfterS: 30 });
  });
  it('an ended session waits for the sign-in, another person’s for theirs', () => {
    expect(answerOf(error(401)).kind).toBe('signed_out');
    const fields = [{ field: 'x-wakeline-person', message: 'Another person is signed in by now.' }];
    expect(answerOf(error(403, { fields })).kind).toBe('other_person');
  });
  it('two versions and refusals wait for a decision, with the reason kept', () => {
    expect(answerOf(error(409, { current: { ref: 'theirs' } }))).toMatchObject({
      kind: 'conflict',
      current: { ref: 'theirs' },
    });
    for (const status of [400, 403, 404, 409, 413, 415, 422])
      expect(answerOf(error(status))).toMatchObject({ kind: 'refused', problem: { message: 'Message' } });
  });
});
