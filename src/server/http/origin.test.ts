import { describe, expect, it } from 'vitest';
import { sameOrigin, sameOriginUpgrade } from './origin';

describe('same origin', () => {
  it.each([
    [{ 'sec-fetch-site': 'same-origin' }, true],
    [{ 'sec-fetch-site': 'none' }, true],
    [{ 'sec-fetch-site': 'same-site' }, false],
    [{ 'sec-fetch-site': 'cross-site', origin: 'http://here:1', host: 'here:1' }, false],
    [{ origin: 'http://here:1', host: 'here:1' }, true],
    [{ origin: 'http://here:2', host: 'here:1' }, false],
    [{ origin: 'null', host: 'here:1' }, false],
    [{ host: 'here:1' }, true],
  ])('%j is %s', (headers, expected) => {
    expect(sameOrigin(new Headers(headers as Record<string, string>))).toBe(expected);
  });

  it('judges an upgrade by Origin and Host', () => {
    expect(sameOriginUpgrade({ origin: 'http://here:1', host: 'here:1' })).toBe(true);
    expect(sameOriginUpgrade({ origin: 'http://evil.example', host: 'here:1' })).toBe(false);
    expect(sameOriginUpgrade({ host: 'here:1' })).toBe(true);
  });
});
