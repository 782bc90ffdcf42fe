import { describe, expect, it } from 'vitest';
import { returnPath } from './return-path';

describe('where sign-in leads', () => {
  it.each(['/', '/shutdown', '/sites/1?range=day', '/commissioning/x/roll-call'])(
    'keeps our own path %s',
    (path) => {
      expect(returnPath(path, '/home')).toBe(path);
    },
  );

  it.each([
    undefined,
    '',
    'https://elsewhere.example/',
    '//elsewhere.example',
    '/\\elsewhere.example',
    '/\t/elsewhere.example',
    '/..//elsewhere.example',
    'javascript:alert(1)',
    '/api/sign-out',
  ])('refuses %s', (path) => {
    expect(returnPath(path, '/home')).toBe('/home');
  });
});
