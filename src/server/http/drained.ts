import type { Writable } from 'node:stream';

/**
 * A wait for whoever reads an answer: Astro writes what it gets as fast as it gets it, so a stream that is longer than
 * memory asks here before each piece. Also resolves when the reader has gone.
 */
export const drainedOf =
  (response: Writable): (() => Promise<void>) =>
  () =>
    !response.writableNeedDrain || response.destroyed
      ? Promise.resolve()
      : new Promise((resolve) => {
          const done = () => {
            response.off('drain', done);
            response.off('close', done);
            resolve();
          };
          response.on('drain', done);
          response.on('close', done);
        });
