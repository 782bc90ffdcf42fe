import { createHash } from 'node:crypto';

/**
 * JSON that is the same for the same data: members sorted by name (by UTF-16 code units, as RFC 8785 asks), no blanks,
 * numbers as ECMAScript writes them. What JSON can't say (undefined) is left out.
 */
export function canonicalJson(value: unknown): string {
  return JSON.stringify(value, (_key, v: unknown) =>
    typeof v === 'object' && v !== null && !Array.isArray(v)
      ? Object.fromEntries(Object.entries(v).sort(([a], [b]) => (a < b ? -1 : a > b ? 1 : 0)))
      : v,
  );
}

/** SHA-256 over the canonical JSON, 64 hex digits. */
export const fingerprintOf = (value: unknown): string =>
  createHash('sha256').update(canonicalJson(value)).digest('hex');
