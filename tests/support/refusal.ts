import { AppError } from '../../src/server/errors';

/** The error with which a service refuses; fails the test when it does the work, or breaks in another way. */
export async function failure(work: Promise<unknown>): Promise<AppError> {
  const error = await work.then(
    () => undefined,
    (e: unknown) => e,
  );
  if (error instanceof AppError) return error;
  throw new Error('it should have been refused', { cause: error });
}
