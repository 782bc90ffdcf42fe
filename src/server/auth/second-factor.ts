import { createHash, randomBytes } from 'node:crypto';
import { Secret, TOTP } from 'otpauth';

/** One-time codes by time (RFC 6238): six digits, thirty seconds, SHA-1, as every authenticator understands them. */

const PERIOD_S = 30;
export const RECOVERY_CODES = 10;

const totp = (secret: string, label: string): TOTP =>
  new TOTP({ issuer: 'Wakeline', label, secret: Secret.fromBase32(secret), period: PERIOD_S, digits: 6 });

/** A new secret, base32. */
export const newSecret = (): string => new Secret({ size: 20 }).base32;

/** What an authenticator reads from a picture of it. */
export const secretAddress = (secret: string, email: string): string => totp(secret, email).toString();

/**
 * The step of time whose code this is, one step early or late allowed; null: it is none. A code counts once: only
 * steps after `usedStep` do.
 */
export function stepOfCode(secret: string, code: string, usedStep: number | null, at: Date): number | null {
  const plain = code.replaceAll(/\s/g, '');
  if (!/^\d{6}$/.test(plain)) return null;
  const delta = totp(secret, '').validate({ token: plain, timestamp: at.getTime(), window: 1 });
  if (delta === null) return null;
  const step = Math.floor(at.getTime() / 1000 / PERIOD_S) + delta;
  return usedStep !== null && step <= usedStep ? null : step;
}

/** Codes for who has lost the authenticator, each good once: shown now, kept as hashes. */
export function newRecoveryCodes(): { shown: string[]; hashes: string[] } {
  const shown = Array.from({ length: RECOVERY_CODES }, () => {
    const text = randomBytes(8).toString('hex').slice(0, 12);
    return `${text.slice(0, 4)}-${text.slice(4, 8)}-${text.slice(8)}`;
  });
  return { shown, hashes: shown.map(recoveryHash) };
}
export const recoveryHash = (code: string): string =>
  createHash('sha256')
    .update(code.toLowerCase().replaceAll(/[^a-z0-9]/g, ''))
    .digest('hex');
