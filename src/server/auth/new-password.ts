import { dictionary } from '@zxcvbn-ts/language-common';
import { passwordFault } from '../../domain/access/password';
import { AppError } from '../errors';
import { hashPassword } from './password';

let common: ReadonlySet<string> | undefined;
const isCommon = (word: string): boolean => (common ??= new Set(dictionary.passwords)).has(word);

/**
 * The hash of a password that somebody chose.
 * @throws AppError invalid (field `password`) with what would do
 */
export async function hashNewPassword(
  password: string,
  about: { email: string; name: string },
): Promise<string> {
  const fault = passwordFault(password, about, isCommon);
  if (fault)
    throw new AppError('invalid', { message: fault, fields: [{ field: 'password', message: fault }] });
  return hashPassword(password);
}
