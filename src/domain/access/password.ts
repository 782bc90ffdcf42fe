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
  if (length < PASSWORD_MIN) return `Use at least ${PASSWORD_MIN} characters: three or four words do well.`;
  if (length > PASSWORD_MAX) return `Use at most ${PASSWORD_MAX} characters.`;
  const words = plain(password);
  if (new Set(words).size < 5) return 'Too few different characters: it would be guessed at once.';
  if (isCommon(words) || isCommon(words.replace(/[^a-z]+$/, '')))
    return 'This one is among the passwords that are tried first. Choose another.';
  const own = [about.email, about.email.split('@')[0] ?? '', about.name, 'wakeline'].map(plain);
  if (own.some((part) => part.length > 3 && words.replaceAll(part, '').length < 6))
    return 'It is made of your own name or address. Choose another.';
  return null;
}
