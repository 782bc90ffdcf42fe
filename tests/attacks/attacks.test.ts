import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { identifierAttacks } from './identifiers';
import { plantedAttacks } from './planted';
import { requestAttacks } from './requests';
import { makeScene, type Scene } from './scene';
import { sharedLinkAttacks } from './shared-links';
import { signingInAttacks } from './signing-in';

/** What somebody with bad intent would try, against one running site as it is built. */
let made: Scene;
const scene = (): Scene => made;
beforeAll(async () => {
  made = await makeScene();
});
afterAll(() => made.end());

describe('signing in', () => signingInAttacks(scene));
describe('shared pages', () => sharedLinkAttacks(scene));
describe('requests', () => requestAttacks(scene));
describe('identifiers', () => identifierAttacks(scene));

describe('what was planted', () => plantedAttacks(scene));

describe('the log of all this, at its most talkative', () => {
  it('names no password, token, code, key or session', async () => {
    const authorization = `Bearer ${made.secret('a-token-of-no-logger')}`;
    await made.ask('/api/v1/ingest', { method: 'POST', body: {}, headers: { authorization } });
    await expect.poll(() => made.site.output()).toContain('a token that nobody knows'); // it did talk
    const said = made.site.output();
    expect([...made.secrets].filter((secret) => said.includes(secret))).toEqual([]);
  });
});
