import { AppError } from '../errors';
import { passwordHashOf } from '../queries/people';
import { forgiveSigner, takeSigningTry } from './limits';
import { verifyPassword } from './password';
import { confirmPasswordRefusals } from '../../words/refusals';

/**
 * The password entered again by somebody who is signed in, before something is signed in their name.
 * @throws AppError invalid (field `password`) when it is not right · too_many after ten wrong ones in 15 minutes
 */
export async function confirmPassword(personId: number, password: string): Promise<void> {
  await takeSigningTry(personId);
  if (!(await verifyPassword(await passwordHashOf(personId), password)))
    throw new AppError('invalid', {
      message: confirmPasswordRefusals.notYoursNothingSigned,
      fields: [{ field: 'password', message: confirmPasswordRefusals.notYours }],
    });
  await forgiveSigner(personId);
}
