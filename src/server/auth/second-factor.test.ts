import { describe, expect, it } from 'vitest';
import { newRecoveryCodes, newSecret, recoveryHash, secretAddress, stepOfCode } from './second-factor';

// RFC 6238, appendix B: the SHA-1 key "12345678901234567890" and the last six of its eight digits
const SECRET = 'GEZDGNBVGY3TQOJQGEZDGNBVGY3TQOJQ';
const VECTORS: [number, string][] = [
  [59, '287082'],
  [1111111109, '081804'],
  [1111111111, '050471'],
  [1234567890, '005924'],
  [2000000000, '279037'],
];
const at = (seconds: number) => new Date(seconds * 1000);

describe('a one-time code', () => {
  it.each(VECTORS)('of RFC 6238 at %i s is %s', (seconds, code) => {
    expect(stepOfCode(SECRET, code, null, at(seconds))).toBe(Math.floor(seconds / 30));
  });

  it('counts once', () => {
    const step = stepOfCode(SECRET, '287082', null, at(59));
    expect(stepOfCode(SECRET, '287082', step, at(59))).toBeNull();
  });

  it('may be one step late, and no more', () => {
    expect(stepOfCode(SECRET, '287082', null, at(59 + 30))).toBe(1);
    expect(stepOfCode(SECRET, '287082', null, at(59 + 61))).toBeNull();
  });

  it.each(['', '12345', 'abcdef', '2870822', '28708٢'])('is not %s', (code) => {
    expect(stepOfCode(SECRET, code, null, at(59))).toBeNull();
  });

  it('is read with the blanks that people type', () => {
    expect(stepOfCode(SECRET, '287 082', null, at(59))).toBe(1);
  });

  it('comes from a secret of 160 bits, told to an authenticator by name', () => {
    const secret = newSecret();
    expect(secret).toMatch(/^[A-Z2-7]{32}$/);
    expect(secretAddress(secret, 'a@b.example')).toContain('otpauth://totp/Wakeline:a%40b.example');
  });
});

describe('recovery codes', () => {
  it('are ten, unlike, and compare however they are typed', () => {
    const { shown, hashes } = newRecoveryCodes();
    expect(new Set(shown).size).toBe(10);
    expect(recoveryHash(` ${(shown[0] ?? '').toUpperCase().replaceAll('-', ' ')}`)).toBe(hashes[0]);
  });
});
