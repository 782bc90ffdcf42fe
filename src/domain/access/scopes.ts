import { scopeTexts } from '../../words/domain-access';
import { mayUse, type Permission, type Role } from './permissions';

/**
 * What a token may be given, each for one subject. A token does what its scopes name and its person may at that moment,
 * never more. Stored by name: none is renamed.
 */
export const TOKEN_SCOPES = [
  'sites:read',
  'units:read',
  'events:read',
  'telemetry:read',
  'commissioning:read',
  'cases:read',
  'loggers:read',
  'write',
] as const;
export type TokenScope = (typeof TOKEN_SCOPES)[number];

export const SCOPE_WORDS: Record<TokenScope, string> = scopeTexts;

/** Why a token may not: its scopes lack it, or its person's role does. */
export type TokenRefusal = 'scope' | 'role';

/** @returns null where it may */
export function tokenRefusal(
  token: { role: Role; scopes: readonly string[] },
  needs: { scope: TokenScope | null; permission: Permission },
): TokenRefusal | null {
  if (!mayUse(token.role, needs.permission)) return 'role';
  return needs.scope === null || token.scopes.includes(needs.scope) ? null : 'scope';
}

/** Days that a token may hold; the choices of the form. */
export const TOKEN_DAYS = [30, 90, 365] as const;
/** Tokens in force that one person may have. */
export const TOKENS_MAX = 20;
