import { beforeEach, describe, expect, it, vi } from 'vitest';

const worked = vi.hoisted(() => ({ calls: [] as { stored: string; password: string }[] }));
vi.mock('@node-rs/argon2', async (original) => {
  const real = await original<typeof import('@node-rs/argon2')>();
  return {
    ...real,
    verify: (stored: string, password: string) => {
      worked.calls.push({ stored, password });
      return real.verify(stored, password);
    },
  };
});
const { hashPassword, verifyPassword } = await import('./password');

describe('checking a password', () => {
  beforeEach(() => {
    worked.calls.length = 0;
  });

  it('is the same work where no account is: one argon2id with the same costs', async () => {
    const stored = await hashPassword('roof-ladder-meter');
    expect(await verifyPassword(stored, 'roof-ladder-meter')).toBe(true);
    expect(await verifyPassword(stored, 'another')).toBe(false);
    expect(await verifyPassword(undefined, 'another')).toBe(false);
    expect(worked.calls).toHaveLength(3);
    const costs = worked.calls.map((c) => c.stored.split('$').slice(0, 4).join('$'));
    expect(new Set(costs)).toEqual(new Set(['$argon2id$v=19$m=19456,t=2,p=1']));
  });

  it('lets nobody in where no account is, not even with the password that stands in for one', async () => {
    expect(await verifyPassword(undefined, 'no account has this password')).toBe(false);
    expect(worked.calls).toHaveLength(1);
  });
});
