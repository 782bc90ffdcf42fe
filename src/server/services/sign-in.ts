import { forgiveAccount, takeSignInTry } from '../auth/limits';
import { verifyPassword } from '../auth/password';
import { openSession } from '../auth/sessions';
import { AppError } from '../errors';
import { credentialsOf, markSeen } from '../queries/people';

/** Opens a session; the answer to a wrong password and to an unknown address is one and the same. */
export async function signIn(given: {
  email: string;
  password: string;
  keep: boolean;
  address: string;
}): Promise<{ cookie: string; role: string }> {
  await takeSignInTry(given.email, given.address);
  const person = await credentialsOf(given.email);
  const right = await verifyPassword(person?.passwordHash, given.password);
  if (!person || !right)
    throw new AppError('unauthenticated', {
      message:
        'E-mail and password do not belong together. Check both, or ask your manager for a new password.',
    });
  await forgiveAccount(given.email);
  await markSeen(person.id);
  return { cookie: await openSession(person.id, given.keep), role: person.role };
}
