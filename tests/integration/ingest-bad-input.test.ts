import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { loggerToken } from '../../simulator/scenarios/tokens';
import { startIngest, stopIngest, ingest } from '../../src/server/ingest/service';
import type { SeededSite } from '../../seeds/plant/seeded';
import { testDatabase, type TestDatabase } from '../support/database';
import { SECRET, testFleet, type TestFleet } from '../support/fleet';
import { frameOf, nowS, openSockets, TestLogger, until, type Sockets } from '../support/ingest';

let db: TestDatabase;
let sockets: Sockets;
let fleet: TestFleet;
let site: SeededSite;
let serial: string;
let token: string;
let logger: TestLogger;

beforeAll(async () => {
  db = await testDatabase();
  fleet = await testFleet(db, ['Old Tannery Market Hall', 'Coopers Wharf Gallery', 'Netloft Terrace']);
  site = fleet.site('Old Tannery Market Hall');
  serial = [...site.loggers.keys()][0] ?? '';
  token = loggerToken(SECRET, serial);
  await startIngest();
  sockets = await openSockets();
});
afterAll(async () => {
  await stopIngest();
  await sockets.close();
  await db.drop();
});
beforeEach(async () => {
  logger = await TestLogger.arrive(sockets, token, serial);
  return () => logger.ws.terminate();
});

const counted = async () => {
  const { rows } = await db.owner.query<{ n: number; last: { field: string; reason: string } | null }>(
    'select refused_count as n, last_refusal as last from logger where serial = $1',
    [serial],
  );
  return rows[0]!;
};
/** That the refusal of `field` was counted at the logger, where people see it. */
const wasCounted = (before: number, field: string) =>
  until(async () => {
    const { n: now, last } = await counted();
    return now > before && last?.field === field;
  }, `the refusal of ${field} is counted`);

const valid = () => {
  const [first] = logger.roster.strings;
  if (!first) throw new Error('the roster is empty');
  return { at: nowS() - 5, string: first.index, frame: frameOf(first.serials.length, 'both') };
};
const broken = (change: (f: ReturnType<typeof valid>) => unknown) => {
  const f = valid();
  change(f);
  return logger.frames([valid(), f]);
};
/** The connection is as good as before: a valid report still becomes durable. */
const lives = () => logger.durable(logger.frames([valid()]));

describe('frames that are wrong are refused with the field named, counted, and the connection lives', () => {
  const cases: [string, (f: ReturnType<typeof valid>) => unknown, string, RegExp][] = [
    [
      'a value out of range',
      (f) => (f.frame.voltageOut![7] = 99_999),
      'frames[1].voltageOut[7]',
      /99999.*from -2000 to 20000/,
    ],
    ['a fraction', (f) => (f.frame.current[0] = 1.5), 'frames[1].current[0]', /whole number/],
    [
      'what can be no text among numbers',
      (f) => (f.frame.state[0] = { toString: 1 } as never),
      'frames[1].state[0]',
      /an object/,
    ],
    ['text among numbers', (f) => (f.frame.signal[2] = '-70' as never), 'frames[1].signal[2]', /"-70"/],
    ['an array that is too short', (f) => f.frame.temperature.pop(), 'frames[1].temperature', /slots/],
    ['an array that is too long', (f) => f.frame.via.push(1), 'frames[1].via', /slots/],
    ['an array that is missing', (f) => delete f.frame.voltageIn, 'frames[1].voltageIn', /missing/],
    ['no array at all', (f) => (f.frame.state = 'passing' as never), 'frames[1].state', /must be an array/],
    [
      'a field that nobody knows',
      (f) => Object.assign(f.frame, { phase: [] }),
      'frames[1].phase',
      /not known/,
    ],
    ['an unknown claim', (f) => (f.frame.state[0] = 9), 'frames[1].state[0]', /from 0 to 4/],
    [
      'a value of a unit that was not heard',
      (f) => (f.frame.state[3] = null),
      'frames[1].voltageOut[3]',
      /not heard/,
    ],
    [
      'a string that the roster does not have',
      (f) => (f.string = 4000),
      'string[1]',
      /no string of roster version/,
    ],
    ['a clock in the future', (f) => (f.at = nowS() + 3600), 'at[1]', /ahead of the server's clock/],
  ];
  it.each(cases)('%s', async (_, change, field, reason) => {
    const { n } = await counted();
    const refusal = await logger.refused(broken(change));
    expect(refusal).toMatchObject({ field, again: false });
    expect(refusal.reason).toMatch(reason);
    await wasCounted(n, field);
    await lives();
  });

  it('nothing of a refused message is written', async () => {
    const f = { ...valid(), at: nowS() - 777 };
    await logger.refused(logger.frames([f, { ...f, at: nowS() + 9999 }]));
    const { rows } = await db.owner.query(`select from string_frame where at = to_timestamp($1::int4)`, [
      f.at,
    ]);
    expect(rows).toHaveLength(0);
  });
});

describe('messages that are wrong as a whole', () => {
  const raw: [string, string | Buffer, boolean, string][] = [
    ['text that is not JSON', 'not { json', false, 'message'],
    ['bytes that are no text', Buffer.from([0xff, 0xfe, 0x00, 0x80]), false, 'message'],
    ['a binary message', Buffer.from('{"type":"frames"}'), true, 'message'],
    ['JSON that is no object', '[1,2,3]', false, 'message'],
    ['a type that the protocol does not have', '{"type":"release","seq":5}', false, 'type'],
    ['an empty object', '{}', false, 'type'],
    ['a type that is no text', '{"type":{"toString":1}}', false, 'type'],
    [
      'a type that is nothing but depth',
      `{"type":${'['.repeat(60_000)}${']'.repeat(60_000)}}`,
      false,
      'type',
    ],
  ];
  it.each(raw)('%s', async (_, data, binary, field) => {
    const { n } = await counted();
    logger.ws.send(data, { binary });
    const refusal = await logger.inbox.next('refused');
    expect(refusal.field).toBe(field);
    await wasCounted(n, field);
    await lives();
  });

  const reports: [string, object, string][] = [
    ['a field too many', { type: 'weather', rows: [], colour: 1 }, 'rows'],
    [
      'an unknown inverter',
      {
        type: 'inputs',
        rows: [{ at: 1_700_000_000 + 9e7, inverter: 'X', input: 1, voltage: 1, current: 1 }],
      },
      'rows[0].inverter',
    ],
    [
      'an unknown sensor',
      {
        type: 'weather',
        rows: [{ at: 0, sensor: 250, irradiance: 1, temperatureAir: 1, temperatureModule: 1, windSpeed: 1 }],
      },
      'rows[0].sensor',
    ],
    ['a command for nothing', { type: 'command', inForce: 'initiator', since: 0, by: 'x' }, 'zone'],
    [
      'a command for an unknown zone',
      { type: 'command', zone: 'Nowhere', inForce: 'initiator', since: 0, by: 'x' },
      'zone',
    ],
    [
      'a command that nobody knows',
      { type: 'command', zone: 'Nowhere', inForce: 'shut', since: 0, by: 'x' },
      'inForce',
    ],
    [
      'a serial that is none',
      { type: 'heard', rows: [{ at: 0, serial: 'x y', gateway: 1, signal: -80, voltage: 1, current: 1 }] },
      'rows[0].serial',
    ],
  ];
  it.each(reports)('%s', async (_, message, field) => {
    // times are made fresh: what is wrong is only what the case says
    const fresh = JSON.parse(
      JSON.stringify(message, (k, v: unknown) => (k === 'at' || k === 'since' ? nowS() - 5 : v)),
    ) as object;
    const refusal = await logger.refused(fresh);
    expect(refusal.field).toBe(field);
    await lives();
  });

  it('10 MB: answered, counted, and the connection is closed with 1009', async () => {
    const { n } = await counted();
    logger.send({ type: 'frames', seq: 1, padding: 'x'.repeat(10_000_000) });
    const refusal = await logger.inbox.next('refused');
    expect(refusal).toMatchObject({ field: 'message', seq: null });
    expect(refusal.reason).toMatch(/bytes; the most is 4194304/);
    expect((await logger.closed).code).toBe(1009);
    await wasCounted(n, 'message');
  });

  it('larger than is read at all: closed with 1009 and counted', async () => {
    const { n } = await counted();
    logger.ws.send('y'.repeat(17 * 1024 * 1024));
    expect((await logger.closed).code).toBe(1009);
    await wasCounted(n, 'message');
  });
});

describe('a hello that is wrong', () => {
  it('of an unknown protocol version is answered and the connection closed', async () => {
    const other = await TestLogger.connect(sockets, token);
    other.send({ type: 'hello', protocol: 7, shape: 'of things to come' });
    expect(await other.inbox.next('refused')).toMatchObject({
      field: 'protocol',
      reason: 'this server speaks version 1; the logger said 7',
      again: false,
    });
    expect((await other.closed).code).toBe(4422);
  });

  it('of a protocol version that is no number is answered and the connection closed', async () => {
    const other = await TestLogger.connect(sockets, token);
    other.send({ type: 'hello', protocol: { toString: 1 } });
    expect((await other.inbox.next('refused')).reason).toBe(
      'this server speaks version 1; the logger said an object',
    );
    expect((await other.closed).code).toBe(4422);
  });

  it('with a firmware that is no text is refused, and may be said again', async () => {
    const other = await TestLogger.connect(sockets, token);
    other.hello(serial, { firmware: '1.0\u0000' });
    expect(await other.inbox.next('refused')).toMatchObject({ field: 'firmware', again: true });
    other.hello(serial);
    await other.inbox.next('roster');
    other.ws.terminate();
  });

  it('of another serial than the token is for', async () => {
    const { n } = await counted();
    const other = await TestLogger.connect(sockets, token);
    other.hello('LG-SOMEBODY-ELSE');
    expect(await other.inbox.next('refused')).toMatchObject({ field: 'logger' });
    expect((await other.closed).code).toBe(4403);
    await wasCounted(n, 'logger');
  });

  it('from a clock in the future may be said again', async () => {
    const other = await TestLogger.connect(sockets, token);
    other.hello(serial, { clock: nowS() + 7200 });
    expect(await other.inbox.next('refused')).toMatchObject({ field: 'clock', again: true });
    other.hello(serial);
    await other.inbox.next('roster');
    other.ws.terminate();
  });

  it('is missing: reports are not taken', async () => {
    const other = await TestLogger.connect(sockets, token);
    other.send({
      type: 'weather',
      seq: 3,
      rows: [{ at: nowS(), sensor: 0, irradiance: 1, temperatureAir: 1, temperatureModule: 1, windSpeed: 1 }],
    });
    expect(await other.inbox.next('refused')).toMatchObject({
      seq: 3,
      reason: 'say hello first',
      again: true,
    });
    other.ws.terminate();
  });
});

describe('what is said to whom', () => {
  it('a logger of a site without reporting units may send no frames for it', async () => {
    const quiet = fleet.site('Coopers Wharf Gallery');
    const name = [...quiet.loggers.keys()][0] ?? '';
    const other = await TestLogger.arrive(sockets, loggerToken(SECRET, name), name);
    const string = other.roster.strings.find((s) => s.kind === 'shutdown_only');
    if (!string) throw new Error('the gallery should have shutdown-only strings in its roster');
    const refusal = await other.refused(
      other.frames([{ at: nowS(), string: string.index, frame: frameOf(string.serials.length, 'both') }]),
    );
    expect(refusal.reason).toMatch(/shutdown-only/);
    other.ws.terminate();
  });

  it('the same wrong token again and again holds up nobody else behind its address', async () => {
    const answers = new Set<string>();
    for (let i = 0; i < 35; i++)
      answers.add(
        await TestLogger.connect(sockets, 'set-up-wrongly').then(
          () => 'in',
          (e: Error) => e.message,
        ),
      );
    expect([...answers]).toEqual(['HTTP 401', 'HTTP 429']);
    const other = await TestLogger.arrive(sockets, token, serial);
    other.ws.terminate();
  });

  it('wrong tokens are counted, and after many the address has to wait', async () => {
    const before = ingest()?.figures().unknownTokens ?? 0;
    const answers = new Set<string>();
    for (let i = 0; i < 35; i++)
      answers.add(
        await TestLogger.connect(sockets, `guess-number-${i}`).then(
          () => 'in',
          (e: Error) => e.message,
        ),
      );
    expect([...answers]).toEqual(['HTTP 401', 'HTTP 429']);
    expect(ingest()?.figures().unknownTokens).toBeGreaterThan(before + 20);
  });
});
