import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { PERMISSIONS, ROLES, mayUse, type Permission } from './permissions';
import { SCOPE_WORDS, TOKEN_SCOPES, tokenRefusal } from './scopes';

const permissions = Object.keys(PERMISSIONS) as Permission[];

describe('a token', () => {
  it('never does more than its person, whatever its scopes are', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(...ROLES),
        fc.constantFrom(...permissions),
        fc.subarray([...TOKEN_SCOPES]),
        fc.constantFrom(null, ...TOKEN_SCOPES),
        (role, permission, scopes, scope) => {
          const refused = tokenRefusal({ role, scopes }, { scope, permission });
          if (refused === null) {
            expect(mayUse(role, permission)).toBe(true);
            expect(scope === null || scopes.includes(scope)).toBe(true);
          } else if (!mayUse(role, permission)) expect(refused).toBe('role');
        },
      ),
    );
  });

  it('without the scope is told that, with it is let through', () => {
    const needs = { scope: 'telemetry:read', permission: 'telemetry.export' } as const;
    expect(tokenRefusal({ role: 'analyst', scopes: ['sites:read'] }, needs)).toBe('scope');
    expect(tokenRefusal({ role: 'analyst', scopes: ['telemetry:read'] }, needs)).toBeNull();
    expect(tokenRefusal({ role: 'customer', scopes: [...TOKEN_SCOPES] }, needs)).toBe('role');
  });

  it('has words for each scope', () => {
    expect(Object.keys(SCOPE_WORDS).sort()).toEqual([...TOKEN_SCOPES].sort());
  });
});
