import { describe, expect, it } from 'vitest';
import { Meanwhile } from './meanwhile';

const add = (page: string[], change: string): string[] => (page.includes(change) ? page : [...page, change]);

describe('changes that come while a page is read', () => {
  it('are put on an answer that is older than they', async () => {
    const meanwhile = new Meanwhile<string>();
    meanwhile.heed('before');
    const page = meanwhile.read(async () => {
      await Promise.resolve();
      return ['old'];
    }, add);
    meanwhile.heed('a');
    meanwhile.heed('b');
    expect(await page).toEqual(['old', 'a', 'b']);
  });

  it('are not kept for the next reading, and each of two gets its own', async () => {
    const meanwhile = new Meanwhile<string>();
    let first = (_page: string[]): void => undefined;
    const one = meanwhile.read(() => new Promise<string[]>((resolve) => (first = resolve)), add);
    meanwhile.heed('a');
    const two = meanwhile.read(() => Promise.resolve(['a']), add);
    meanwhile.heed('b');
    expect(await two).toEqual(['a', 'b']);
    first([]);
    expect(await one).toEqual(['a', 'b']);
    meanwhile.heed('between');
    expect(await meanwhile.read(() => Promise.resolve([]), add)).toEqual([]);
  });

  it('and a reading that fails leaves nothing behind', async () => {
    const meanwhile = new Meanwhile<string>();
    await expect(meanwhile.read(() => Promise.reject(new Error('away')), add)).rejects.toThrow('away');
    meanwhile.heed('late');
    expect(await meanwhile.read(() => Promise.resolve(['new']), add)).toEqual(['new']);
  });
});
