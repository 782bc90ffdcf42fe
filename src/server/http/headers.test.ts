import { describe, expect, it } from 'vitest';
import { answerHeaders, commonHeaders, DATA_POLICY, pagePolicy } from './headers';

const directives = (text: string): Map<string, string> =>
  new Map(
    text.split('; ').map((line) => {
      const [name = '', ...values] = line.split(' ');
      return [name, values.join(' ')];
    }),
  );

describe('the policy of a page', () => {
  const plain = directives(pagePolicy({}, false));

  it('runs our files and the inline scripts it knows by hash, and nothing else', () => {
    expect(plain.get('default-src')).toBe("'none'");
    expect(plain.get('script-src')).toMatch(/^'self'( 'sha256-[A-Za-z0-9+/]{43}=')+$/);
    expect(plain.get('script-src-attr')).toBe("'none'");
    expect(plain.get('style-src')).toMatch(/^'self'( 'sha256-[A-Za-z0-9+/]{43}=')+$/);
    expect(plain.get('base-uri')).toBe("'none'");
    expect(plain.get('form-action')).toBe("'self'");
  });

  it('lets WebAssembly run only where the camera reads codes', () => {
    expect(plain.get('script-src')).not.toContain('eval');
    const camera = directives(pagePolicy({ camera: true }, false));
    expect(camera.get('script-src')).toContain("'wasm-unsafe-eval'");
    expect(camera.get('script-src')).not.toContain("'unsafe-eval'");
  });

  it('lets no page show it in a frame but the one that a lobby screen names', () => {
    expect(plain.get('frame-ancestors')).toBe("'none'");
    const framed = directives(pagePolicy({ framedBy: 'https://screens.example' }, false));
    expect(framed.get('frame-ancestors')).toBe('https://screens.example');
  });
});

it('the policy of data runs and loads nothing', () => {
  expect(directives(DATA_POLICY)).toEqual(
    new Map([
      ['default-src', "'none'"],
      ['frame-ancestors', "'none'"],
      ['sandbox', ''],
    ]),
  );
});

it('the camera is for the page that reads codes', () => {
  const of = (doors: object) =>
    answerHeaders({ HSTS_MAX_AGE_S: undefined }, { isPage: true, doors, development: false })[
      'permissions-policy'
    ];
  expect(of({})).toContain('camera=(),');
  expect(of({ camera: true })).toContain('camera=(self),');
});

it('HTTPS is demanded for as long as was set, and not unasked', () => {
  expect(commonHeaders({ HSTS_MAX_AGE_S: undefined })).not.toHaveProperty('strict-transport-security');
  expect(commonHeaders({ HSTS_MAX_AGE_S: 31_536_000 })['strict-transport-security']).toBe('max-age=31536000');
});
