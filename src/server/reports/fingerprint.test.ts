import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { canonicalJson, fingerprintOf } from './fingerprint';

describe('canonical JSON', () => {
  it('sorts members at every depth and keeps the order of lists', () => {
    expect(canonicalJson({ b: [{ z: 1, a: null }, 2], a: 'x', c: undefined })).toBe(
      '{"a":"x","b":[{"a":null,"z":1},2]}',
    );
  });
  it('is the same after a journey through JSON, whatever the order of members', () => {
    fc.assert(
      fc.property(fc.jsonValue(), (value) => {
        const back: unknown = JSON.parse(JSON.stringify(value));
        expect(canonicalJson(back)).toBe(canonicalJson(value));
      }),
    );
  });
});

describe('a fingerprint', () => {
  it('is the SHA-256 of the canonical JSON', () => {
    // FIPS 180-4's hash of "{}", as `printf '{}' | sha256sum` gives it
    expect(fingerprintOf({})).toBe('44136fa355b3678a1146ad16f7e8649e94fb4fc21fe77e8310c060f61caaff8a');
  });
  it('changes with any figure', () => {
    expect(fingerprintOf({ v: 8.4 })).not.toBe(fingerprintOf({ v: 8.5 }));
  });
});
