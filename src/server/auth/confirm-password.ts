import { AppError } from '../errors';
import { passwordHashOf } from '../queries/people';
import { forgiveSigner, takeSigningTry } from './limits';
import { verifyPassword } from './password';

/**
 * The password entered again by somebody who is signed in, before something is signed in their name.
 * @throws AppError invalid (field `password`) when it is not right · too_many after ten wrong ones in 15 minutes
 */
export async function confirmPassword(personId: number, password: string): Promise<void> {
  await takeSigningTry(personId);
  if (!(await verifyPassword(await passwordHashOf(personId), password)))
    throw new AppError('invalid', {
      message: 'This is not your password. Enter the one that you sign in with; nothing was signed.',
      fields: [{ field: 'password', message: 'This is not your password.' }],
    });
  await forgiveSigner(personId);
}
