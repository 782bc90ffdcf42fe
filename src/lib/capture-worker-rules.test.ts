import { describe, expect, it } from 'vitest';
import { changesPerson, referencesIn, ruleFor } from './capture-worker-rules';

const ORIGIN = 'https://roofs.example';
const SITE = '0b0f6a53-6f5e-4a55-9d6b-2c0a3a0c1f11';
const rule = (path: string, some: Partial<Parameters<typeof ruleFor>[0]> = {}) =>
  ruleFor({ method: 'GET', url: new URL(path, ORIGIN).href, navigates: false, ...some }, ORIGIN);

describe('the worker answers', () => {
  it('the phone’s own page, when it is opened', () => {
    expect(rule(`/capture/${SITE}?string=x`, { navigates: true })).toBe('shell');
    expect(rule('/capture', { navigates: true })).toBe('shell');
    expect(rule(`/capture/${SITE}`)).toBe('pass');
  });
  it('files that are named by their content', () => {
    expect(rule('/_astro/Capture.abc123.js')).toBe('asset');
    expect(rule('/favicon.svg')).toBe('asset');
  });
  it('nothing of the API, of other pages, of other origins, and no upload', () => {
    for (const path of [
      '/',
      '/sites/x',
      `/commissioning/${SITE}`,
      '/api/fleet',
      `/api/sites/${SITE}/capture`,
    ])
      for (const navigates of [true, false]) expect(rule(path, { navigates })).toBe('pass');
    expect(rule(`/api/sites/${SITE}/checks`, { method: 'POST' })).toBe('pass');
    expect(rule(`/capture/${SITE}`, { method: 'POST', navigates: true })).toBe('pass');
    expect(rule('https://elsewhere.example/_astro/x.js')).toBe('pass');
  });
  it('sign-in and sign-out only to hear that they were done', () => {
    for (const path of ['/api/sign-in', '/api/sign-out', '/sign-in'])
      expect(rule(path, { method: 'POST', navigates: true })).toBe('sign');
    expect(rule('/sign-in', { navigates: true })).toBe('pass');
    expect(changesPerson({ ok: true, type: 'basic', status: 204 })).toBe(true);
    expect(changesPerson({ ok: false, type: 'opaqueredirect', status: 0 })).toBe(true);
    expect(changesPerson({ ok: false, type: 'basic', status: 422 })).toBe(false);
  });
});

it('finds what a page, a script and a style sheet load, and nothing else', () => {
  const html =
    '<link rel="stylesheet" href="/_astro/a.B1.css"><script src="https://cdn.example/_astro/x.js"></script>' +
    '<astro-island component-url="/_astro/Capture.C2.js" renderer-url="/_astro/client.D3.js"><a href="/sites/x.js">';
  expect(referencesIn(html, `${ORIGIN}/capture`)).toEqual([
    `${ORIGIN}/_astro/a.B1.css`,
    `${ORIGIN}/_astro/Capture.C2.js`,
    `${ORIGIN}/_astro/client.D3.js`,
  ]);
  const script = 'import{a}from"./Button.E4.js";const d=["_astro/later.F5.js"];import("./more.G6.js")';
  expect(referencesIn(script, `${ORIGIN}/_astro/Capture.C2.js`)).toEqual([
    `${ORIGIN}/_astro/Button.E4.js`,
    `${ORIGIN}/_astro/later.F5.js`,
    `${ORIGIN}/_astro/more.G6.js`,
  ]);
  expect(referencesIn('src:url(/_astro/type.H7.woff2) format("woff2")', `${ORIGIN}/_astro/a.B1.css`)).toEqual(
    [`${ORIGIN}/_astro/type.H7.woff2`],
  );
});
