import { Writable } from 'node:stream';
import { describe, expect, it } from 'vitest';
import { drainedOf } from './drained';

/** A reader that takes what was written when it is told to. */
function slow() {
  const taken: (() => void)[] = [];
  const response = new Writable({
    highWaterMark: 4,
    write: (_chunk, _encoding, done) => void taken.push(done),
  });
  return { response, take: () => taken.shift()?.() };
}
const state = (wait: Promise<void>): Promise<string> =>
  Promise.race([wait.then(() => 'drained'), new Promise<string>((r) => setImmediate(() => r('waits')))]);

describe('the wait for a reader', () => {
  it('is none while there is room', async () => {
    const { response } = slow();
    response.write('ab');
    expect(await state(drainedOf(response)())).toBe('drained');
  });
  it('ends when what was written has been taken', async () => {
    const { response, take } = slow();
    response.write('abcdefgh');
    const wait = drainedOf(response)();
    expect(await state(wait)).toBe('waits');
    take();
    expect(await state(wait)).toBe('drained');
    expect(response.listenerCount('drain')).toBe(0);
  });
  it('ends when the reader has gone', async () => {
    const { response } = slow();
    response.write('abcdefgh');
    const wait = drainedOf(response)();
    response.destroy();
    await wait;
    expect(await state(drainedOf(response)())).toBe('drained');
  });
});
