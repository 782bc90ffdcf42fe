import { mkdtempSync, rmSync } from 'node:fs';
import { request } from 'node:http';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { startSimulator, type Simulator } from '../engine';
import { DEMO_SEED, demoFleet } from '../scenarios/demo';
import type { SiteTruth } from '../truth';

/** The plant's own page and its interface; the loggers find nobody to talk to here. */
const SINCE = Date.UTC(2026, 11, 1, 10) / 1000;
const SITE = 'weirside-clinic';
let simulator: Simulator;
let directory: string;

const start = () => {
  const whole = demoFleet(DEMO_SEED, SINCE);
  return startSimulator({
    plan: {
      ...whole,
      organisations: whole.organisations.map((o) => ({ ...o, sites: o.sites.filter((s) => s.key === SITE) })),
    },
    ingestUrl: 'ws://127.0.0.1:9/ingest/v1',
    secret: 's',
    now: SINCE,
    speed: 0,
    port: 0,
    stateFile: join(directory, 'state.json'),
  });
};
beforeEach(async () => {
  directory = mkdtempSync(join(tmpdir(), 'plant-'));
  simulator = await start();
  return () => rmSync(directory, { recursive: true });
});
afterEach(() => simulator.stop());

const url = (path: string) => new URL(path, simulator.pageUrl ?? '').href;
const truth = async () => (await (await fetch(url(`/api/truth/${SITE}`))).json()) as SiteTruth;
const post = (path: string, body: unknown, headers: Record<string, string> = {}) =>
  fetch(url(path), {
    method: 'POST',
    headers: { 'content-type': 'application/json', ...headers },
    body: JSON.stringify(body),
  });

describe('the plant’s page', () => {
  it('lists the sites and shows a site’s switches, as something outside Wakeline', async () => {
    const list = await (await fetch(url('/'))).text();
    expect(list).toContain('Weirside Clinic');
    expect(list).toContain('no part of Wakeline');
    const page = await fetch(url(`/sites/${SITE}`));
    expect(page.headers.get('content-security-policy')).toContain("default-src 'none'");
    expect(await page.text()).toContain('data-initiator="Main initiator"');
    expect((await fetch(url('/sites/nowhere'))).status).toBe(404);
  });

  it('opens and closes an initiator', async () => {
    const path = `/api/sites/${SITE}/initiators/${encodeURIComponent('Main initiator')}`;
    expect((await post(path, { open: true })).status).toBe(200);
    await simulator.advance(30);
    const open = await truth();
    expect(open.initiators[0]?.open).toBe(true);
    expect(open.units.every((u) => u.mode === 'shutdown')).toBe(true);
    expect((await post(path, { open: false })).status).toBe(200);
    await simulator.advance(60);
    expect((await truth()).units.every((u) => u.mode === 'passing')).toBe(true);
    expect((await post(`/api/sites/${SITE}/initiators/None`, { open: true })).status).toBe(404);
  });

  it('puts a fault in and clears it', async () => {
    const made = await post(`/api/sites/${SITE}/faults`, {
      kind: 'stuck',
      string: 'A2',
      position: 3,
      at: 'now',
    });
    expect(made.status).toBe(201);
    const { id } = (await made.json()) as { id: string };
    await simulator.advance(2);
    const ill = await truth();
    expect(ill.faults.map((f) => f.id)).toEqual([id]);
    expect(ill.units.filter((u) => u.mode === 'shutdown').map((u) => `${u.string}-${u.position}`)).toEqual([
      'A2-3',
    ]);
    expect((await fetch(url(`/api/sites/${SITE}/faults/${id}`), { method: 'DELETE' })).status).toBe(200);
    await simulator.advance(40);
    expect((await truth()).units.every((u) => u.mode === 'passing')).toBe(true);
  });

  it.each([
    [{ kind: 'stuck', string: 'Z9', position: 3 }, 'string'],
    [{ kind: 'stuck', string: 'A2', position: 33 }, 'position'],
    [{ kind: 'grid_lost', inverter: 'Inverter 9' }, 'inverter'],
    [{ kind: 'curtailed', inverter: 'Inverter 1', share: 7 }, 'share'],
    [{ kind: 'unheard of' }, 'kind'],
  ])('refuses %j and names the field', async (body, field) => {
    const reply = await post(`/api/sites/${SITE}/faults`, body);
    expect(reply.status).toBe(422);
    expect(await reply.json()).toMatchObject({ field });
  });

  it('takes JSON only, and no orders from other pages or names', async () => {
    const path = `/api/sites/${SITE}/faults`;
    const form = await fetch(url(path), {
      method: 'POST',
      body: 'kind=snow',
      headers: { 'content-type': 'text/plain' },
    });
    expect(form.status).toBe(415);
    const broken = await fetch(url(path), {
      method: 'POST',
      body: '{',
      headers: { 'content-type': 'application/json' },
    });
    expect(broken.status).toBe(400);
    expect((await post(path, { kind: 'snow' }, { origin: 'http://elsewhere.example' })).status).toBe(403);
    const { port } = new URL(simulator.pageUrl ?? '');
    const status = await new Promise((done, fail) =>
      request({ host: '127.0.0.1', port, path: '/', headers: { host: 'elsewhere.example' } }, (res) => {
        res.resume();
        done(res.statusCode);
      })
        .on('error', fail)
        .end(),
    );
    expect(status).toBe(403);
    expect((await truth()).faults).toEqual([]);
  });

  it('keeps switches and faults between starts', async () => {
    simulator.setInitiator(SITE, 'Main initiator', true);
    simulator.inject(SITE, { kind: 'connector', string: 'A1', ohm: 1 });
    await simulator.stop();
    simulator = await start();
    const after = await truth();
    expect(after.initiators[0]?.open).toBe(true);
    expect(after.faults.map((f) => f.fault.kind)).toEqual(['connector']);
  });
});
