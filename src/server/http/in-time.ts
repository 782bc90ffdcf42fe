import { AppError } from '../errors';
import { inTimeRefusals } from '../../words/refusals';

/**
 * The answer of a database that may stand still without a word: it keeps no limit then, and a page would wait for ever.
 * What was asked goes on behind; its connection is taken until it ends.
 * @throws AppError unavailable, when there is none within `ms`
 */
export async function inTime<T>(ms: number, answer: Promise<T>): Promise<T> {
  let timer: NodeJS.Timeout | undefined;
  const late = new Promise<never>((_, reject) => {
    timer = setTimeout(
      () =>
        reject(
          new AppError('unavailable', {
            message: inTimeRefusals.databaseLate,
            retryAfterS: 10,
          }),
        ),
      ms,
    );
  });
  try {
    return await Promise.race([answer, late]);
  } finally {
    clearTimeout(timer);
  }
}
