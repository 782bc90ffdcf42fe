import { once } from 'node:events';
import { mkdtemp, rm } from 'node:fs/promises';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterEach, describe, expect, it } from 'vitest';
import { WebSocketServer } from 'ws';
import type { FramesMessage, LoggerMessage, Roster } from '../../src/schemas/ingest';
import { frameAt, frameText, loadString, shutdownSince, type LoadShape } from './frames';
import { readLedger } from './ledger';
import { readLoadOptions } from './options';
import { startLoad } from './run';

const SHAPE: LoadShape = { seed: 1, noonHour: 12, silent: 0.3, stuck: 0.3, shutdowns: 1 };
const NOON = 1_796_126_400;

describe('the frames of a load', () => {
  it('depend on string and instant alone, as text too', () => {
    const string = () => loadString(SHAPE, 'LG-FLEET-000001', 3, [true, false, true]);
    for (const down of [false, true])
      for (let atS = NOON; atS < NOON + 3600; atS += 60)
        expect(JSON.parse(frameText(SHAPE, string(), atS, down) ?? '')).toEqual(
          frameAt(SHAPE, string(), atS, down),
        );
    const frame = frameAt(SHAPE, string(), NOON, false);
    expect(Object.values(frame).every((values: unknown[]) => values.length === 3 && values[1] === null)).toBe(
      true,
    );
  });
  it('have silent units, units in shutdown by themselves, an initiator used now and then, and nights', () => {
    const strings = Array.from({ length: 40 }, (_, i) =>
      loadString(SHAPE, 'LG-A', i, Array<boolean>(10).fill(true)),
    );
    const minutes = Array.from({ length: 180 }, (_, i) => NOON + 60 * i);
    const states = strings.map((s) => minutes.map((atS) => frameAt(SHAPE, s, atS, false).state));
    expect(states.some((of) => of.every((state) => state.filter((x) => x === null).length === 1))).toBe(true);
    expect(states.some((of) => of.some((state) => state.includes(2)) && of.some((s) => !s.includes(2)))).toBe(
      true,
    );
    const down = minutes.filter((atS) => shutdownSince(SHAPE, 'LG-A', atS) !== null);
    expect(down.length).toBeGreaterThan(8);
    expect(down.length).toBeLessThan(25);
    expect(frameText(SHAPE, strings[0]!, NOON + 12 * 3600, false)).toBeNull();
  });
});

describe('the options of a load', () => {
  const env = { WAKELINE_DEMO_SECRET: 'secret' };
  it('name what is wrong', () => {
    expect(() => readLoadOptions(['--loggers', '0', '--duration', '5'], env)).toThrow(/--loggers/);
    expect(() =>
      readLoadOptions(['--loggers', '1', '--duration', '5', '--url', 'ws://wakeline.example/ingest/v1'], env),
    ).toThrow(/--url: must be an address of this machine/);
    expect(() => readLoadOptions(['--loggers', '1', '--duration', '5'], {})).toThrow(/WAKELINE_DEMO_SECRET/);
  });
});

const roster: Roster = {
  type: 'roster',
  version: 7,
  reportIntervalS: 60,
  strings: [0, 1].map((index) => ({
    index,
    name: `S${index}`,
    kind: 'monitored',
    zone: 'Roof',
    inverter: 'Inverter 1',
    input: index + 1,
    serials: ['UNIT-1', 'UNIT-2', null],
  })),
  inverters: [{ name: 'Inverter 1', inputs: [1, 2] }],
  gateways: [],
  sensors: [{ number: 0, kind: 'poa_global' }],
  zones: ['Roof'],
  transmitters: [],
};

describe('a load', () => {
  let server: WebSocketServer | undefined;
  let folder: string | undefined;
  afterEach(async () => {
    server?.close();
    if (folder) await rm(folder, { recursive: true });
  });

  it('sends again what a broken connection left, twice what it should, and writes down what was acknowledged', async () => {
    server = new WebSocketServer({ port: 0, host: '127.0.0.1' });
    await once(server, 'listening');
    const got: Exclude<LoggerMessage, { type: 'hello' }>[] = [];
    const acknowledged = new Set<string>();
    let broken = false;
    server.on('connection', (ws) => {
      ws.on('error', () => undefined);
      ws.on('message', (data: Buffer) => {
        const message = JSON.parse(data.toString()) as LoggerMessage;
        if (message.type === 'hello') {
          ws.send(JSON.stringify(roster));
          return;
        }
        got.push(message);
        if (got.length === 40 && !broken) {
          broken = true;
          ws.terminate();
          return;
        }
        if (message.type === 'frames')
          for (const [i, atS] of message.at.entries()) acknowledged.add(`${atS} ${message.string[i]}`);
        ws.send(JSON.stringify({ type: 'ack', seq: message.seq }));
      });
    });
    folder = await mkdtemp(path.join(tmpdir(), 'wakeline-load-'));
    const file = path.join(folder, 'ledger');
    const { port } = server.address() as AddressInfo;
    const run = startLoad({
      url: `ws://127.0.0.1:${port}/ingest/v1`,
      secret: 'secret',
      loggers: 2,
      duration: 60,
      ramp: 0,
      backlog: 8100, // whatever the hour, an initiator was used in it
      duplicates: 0.2,
      disorder: 0.2,
      shutdowns: 1,
      ledger: file,
    });
    const kinds = () => new Set(got.map((m) => m.type));
    await expect.poll(() => broken && acknowledged.size > 100 && kinds().size === 5).toBe(true);
    const figures = await run.stop();
    const lines = [];
    for await (const line of readLedger(file)) lines.push(line);
    expect(lines).toHaveLength(figures.acknowledgedMessages);
    const frames = lines.filter((l) => l.type === 'frames');
    expect(new Set(frames.flatMap((l) => (l.strings ?? []).map((s) => `${l.at} ${s}`)))).toEqual(
      acknowledged,
    );
    expect(acknowledged.size).toBeGreaterThan(100);
    expect(figures.repeated).toBeGreaterThan(0);
    expect(figures.duplicates).toBeGreaterThan(0);
    expect(figures.latencyMs(0.95)).toBeGreaterThan(0);
    const ats = got.filter((m): m is FramesMessage => m.type === 'frames').map((m) => m.at[0] ?? 0);
    expect(ats.some((at, i) => i > 0 && at < (ats[i - 1] ?? 0))).toBe(true);
    expect(kinds()).toEqual(new Set(['frames', 'inputs', 'inverters', 'weather', 'command']));
  });
});
