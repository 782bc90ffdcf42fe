import { passwordSaid as said } from '../../words/domain-access';

/** What a password must be: long, and none that everybody tries first. No rules of composition (NIST SP 800-63B, 5.1.1.2). */

export const PASSWORD_MIN = 12;
export const PASSWORD_MAX = 200;

const plain = (text: string): string => text.normalize('NFKC').toLocaleLowerCase('en');

/**
 * Why a password won't do, with the remedy; null: it will.
 * @param isCommon whether a word, in lower case, is among those that are tried first
 */
export function passwordFault(
  password: string,
  about: { email: string; name: string },
  isCommon: (word: string) => boolean,
): string | null {
  const length = [...password].length;
  if (length < PASSWORD_MIN) return said.tooShort(PASSWORD_MIN);
  if (length > PASSWORD_MAX) return said.tooLong(PASSWORD_MAX);
  const words = plain(password);
  if (new Set(words).size < 5) return said.tooPlain;
  if (isCommon(words) || isCommon(words.replace(/[^a-z]+$/, ''))) return said.common;
  const own = [about.email, about.email.split('@')[0] ?? '', about.name, 'wakeline'].map(plain);
  if (own.some((part) => part.length > 3 && words.replaceAll(part, '').length < 6)) return said.own;
  return null;
}
