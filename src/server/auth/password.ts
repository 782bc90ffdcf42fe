import { hash, verify } from '@node-rs/argon2';

/** Argon2id with the parameters that OWASP's password storage cheat sheet gives (19 MiB, 2 passes, 1 lane). */
const PARAMETERS = { memoryCost: 19_456, timeCost: 2, parallelism: 1, outputLen: 32 } as const;

export const hashPassword = (password: string): Promise<string> => hash(password, PARAMETERS);

let nobody: Promise<string> | undefined;

/** True when the password is right. Without a hash the same work is done for nothing, so that time tells nothing. */
export async function verifyPassword(storedHash: string | undefined, password: string): Promise<boolean> {
  nobody ??= hashPassword('no account has this password');
  const right = await verify(storedHash ?? (await nobody), password);
  return storedHash !== undefined && right;
}
