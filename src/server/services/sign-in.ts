import { forgiveAccount, takeSignInTry } from '../auth/limits';
import { verifyPassword } from '../auth/password';
import { openSession } from '../auth/sessions';
import { asSignIn } from '../db/transaction';
import { AppError } from '../errors';
import { credentialsOf, markSeen } from '../queries/people';
import { takeSecondFactor } from './my-account';
import { signInRefusals } from '../../words/refusals-people';

/** Opens a session; the answer to a wrong password and to an unknown address is one and the same. */
export async function signIn(
  given: {
    email: string;
    password: string;
    keep: boolean;
    /** Of the authenticator, or a recovery code; asked for once the password was right. */
    code?: string;
    address: string;
    agent: string | null;
  },
  at: Date,
): Promise<{ cookie: string; role: string }> {
  await takeSignInTry(given.email, given.address);
  const person = await credentialsOf(given.email);
  const right = await verifyPassword(person?.passwordHash, given.password);
  if (!person || !right)
    throw new AppError('unauthenticated', {
      message: signInRefusals.notTogether,
    });
  if (person.secondFactorSince) {
    const { code } = given;
    if (!code)
      throw new AppError('unauthenticated', {
        message: signInRefusals.typeCodeOrRecovery,
        fields: [{ field: 'code', message: signInRefusals.typeCode }],
      });
    await asSignIn((tx) => takeSecondFactor(tx, person.id, code, at));
  }
  await forgiveAccount(given.email);
  await markSeen(person.id);
  return { cookie: await openSession(person.id, given.keep, given), role: person.role };
}
