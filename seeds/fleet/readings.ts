import type { Knex } from 'knex';
import { codeOf, UNIT_STATES, VERDICTS } from '../../src/domain/verdicts/codes';
import { newMemory, SEEN_PASSING, SEEN_SHUTDOWN } from '../../src/domain/verdicts/memory';
import { frameAt, lightAt, loadString, type LoadShape, type LoadString } from '../../simulator/load/frames';
import type { Frame } from '../../src/schemas/ingest';
import { arrayField, copyMade, instant } from '../history/copy';
import { QUARTER_COLUMNS, QUARTER_S } from '../history/quarters';
import { UNITS_A_STRING, type FleetString } from './plant';

const PRESENT = new Array<boolean>(UNITS_A_STRING).fill(true);
const FRAME_COLUMNS = [
  'at',
  'string_id',
  'mask',
  'voltage_sum',
  'power_sum',
  'voltage',
  'current',
  'temperature',
  'signal',
  'via',
  'state',
];

export interface Seat {
  of: FleetString;
  load: LoadString;
}
export const seatsOf = (strings: readonly FleetString[], shape: LoadShape): Seat[] =>
  strings.map((of) => ({ of, load: loadString(shape, of.logger, of.index, PRESENT) }));

const sum = (values: readonly (number | null)[]): number => values.reduce<number>((s, v) => s + (v ?? 0), 0);
const volts = (f: Frame): (number | null)[] => f.voltageOut ?? [];
const power = (f: Frame): number =>
  Math.round(volts(f).reduce<number>((s, v, i) => s + (v ?? 0) * (f.current[i] ?? 0), 0) / 10_000);
const mask = (f: Frame): bigint => f.state.reduce((m, s, i) => (s === null ? m : m | (1n << BigInt(i))), 0n);

/** What of a frame or quarter does not depend on its string is made once: sound strings differ by sixteen looks only. */
function kept(make: (frame: Frame) => string, shape: LoadShape): (load: LoadString, atS: number) => string {
  const made = new Map<string, string>();
  return (load, atS) => {
    const own = load.kind === 'plain' ? '' : String(load.key);
    const look = (load.key + Math.floor(atS / 60)) % 16;
    if (load.kind === 'stuck') return make(frameAt(shape, load, atS, false));
    const key = `${own} ${look} ${Math.floor(atS / QUARTER_S)}`;
    let text = made.get(key);
    if (text === undefined) {
      text = make(frameAt(shape, load, atS, false));
      if (made.size > 100_000) made.clear();
      made.set(key, text);
    }
    return text;
  };
}

/** A row of each string at each lit step before `endS`: when, which string, and what `text` says of it. */
function* litRows(
  seats: readonly Seat[],
  shape: LoadShape,
  text: (load: Seat['load'], atS: number) => string,
  steps: { fromS: number; endS: number; stepS: number },
): Generator<string> {
  const { fromS, endS, stepS } = steps;
  for (let atS = Math.ceil(fromS / stepS) * stepS; atS < endS; atS += stepS) {
    if (lightAt(shape, atS) <= 0.02) continue;
    const at = instant(atS);
    for (const { of, load } of seats) yield `${at}\t${of.id}\t${text(load, atS)}`;
  }
}

/** Frames of each lit minute from `fromS` until `untilS`, string by string in order of time within an hour. */
export function writeFrames(
  tx: Knex.Transaction,
  seats: readonly Seat[],
  shape: LoadShape,
  fromS: number,
  untilS: number,
): Promise<number> {
  const text = kept(
    (f) =>
      [
        mask(f),
        sum(volts(f)),
        power(f),
        ...[volts(f), f.current, f.temperature, f.signal, f.via, f.state].map(arrayField),
      ].join('\t'),
    shape,
  );
  const steps = { fromS, endS: untilS + 1, stepS: 60 };
  return copyMade(tx, 'string_frame', FRAME_COLUMNS, litRows(seats, shape, text, steps));
}

/** Quarters of an hour from `fromS` until `untilS`. */
export function writeQuarters(
  tx: Knex.Transaction,
  seats: readonly Seat[],
  shape: LoadShape,
  fromS: number,
  untilS: number,
): Promise<number> {
  const text = kept((f) => {
    const v = sum(volts(f));
    return [
      15,
      v,
      v - 20,
      v + 20,
      power(f) * 15,
      arrayField(volts(f)),
      arrayField(f.current),
      arrayField(
        volts(f).map((x, i) => (x === null ? null : Math.round((x * (f.current[i] ?? 0)) / 10_000) * 15)),
      ),
      arrayField(f.temperature),
    ].join('\t');
  }, shape);
  const steps = { fromS, endS: untilS, stepS: QUARTER_S };
  return copyMade(tx, 'string_quarter', QUARTER_COLUMNS, litRows(seats, shape, text, steps));
}

/** The newest frame of each string, and what is concluded of it: as if judgement had followed it up to there. */
export async function writeNewest(
  tx: Knex.Transaction,
  seats: readonly Seat[],
  shape: LoadShape,
  atS: number,
): Promise<void> {
  const stateColumns = FRAME_COLUMNS.filter((c) => c !== 'string_id');
  await copyMade(
    tx,
    'string_state',
    ['string_id', 'site_id', ...stateColumns, 'seen'],
    newestRows(seats, shape, atS),
  );
  const judgedColumns = [
    'string_id',
    'site_id',
    'frame_at',
    'judged_at',
    'state',
    'verdict',
    'since',
    'evidence',
    'memory',
    'passing',
    'shutdown',
    'silent',
    'stuck',
  ];
  await copyMade(tx, 'string_judgement', judgedColumns, judgedRows(seats, shape, atS));
  const at = new Date(atS * 1000);
  await tx.raw(
    `insert into input_state (input_id, site_id, at, voltage, current) select id, site_id, ?, 6330, 900 from input`,
    [at],
  );
  await tx.raw(
    `insert into inverter_state (inverter_id, site_id, at, ac_power, energy, status, insulation, arc_flag, earth_fault_flag)
     select id, site_id, ?, 28000, 90000000, 'running', 950, false, false from inverter`,
    [at],
  );
  await tx.raw(
    `insert into weather_state (sensor_id, site_id, at, irradiance, temperature_air, temperature_module, wind_speed)
     select id, site_id, ?, case when kind = 'ambient' then null else 930 end, 180, 450, 20 from sensor`,
    [at],
  );
}

function* newestRows(seats: readonly Seat[], shape: LoadShape, atS: number): Generator<string> {
  for (const { of, load } of seats) {
    const f = frameAt(shape, load, atS, false);
    const row = [mask(f), sum(volts(f)), power(f)];
    const arrays = [volts(f), f.current, f.temperature, f.signal, f.via, f.state].map(arrayField);
    const seen = arrayField(f.state.map((s) => (s === null ? 0 : atS)));
    yield [of.id, of.siteId, instant(atS), ...row, ...arrays, seen].join('\t');
  }
}

function* judgedRows(seats: readonly Seat[], shape: LoadShape, atS: number): Generator<string> {
  const [passing, shutdown, silent] = (['passing', 'shutdown', 'silent'] as const).map((s) =>
    codeOf(UNIT_STATES, s),
  );
  const stuck = codeOf(VERDICTS, 'stuck');
  const dawnS = atS - 5 * 3600;
  const longAgoS = atS - 20 * 86_400;
  for (const { of, load } of seats) {
    const f = frameAt(shape, load, atS, false);
    const memory = newMemory({
      slots: PRESENT,
      behaviour: { kind: 'monitored' } as Parameters<typeof newMemory>[0]['behaviour'],
    });
    memory.atS = atS;
    memory.sweptAtS = atS;
    memory.stringFirst = dawnS;
    f.state.forEach((claim, i) => {
      const held = claim === 2;
      memory.state[i] = (claim === null ? silent : held ? shutdown : passing) ?? 0;
      memory.verdict[i] = held ? stuck : 0;
      memory.since[i] = held ? atS - 240 : claim === null ? dawnS : longAgoS;
      memory.seen[i] = claim === null ? longAgoS : atS;
      memory.first[i] = claim === null ? 0 : dawnS;
      memory.claim[i] = claim ?? 0;
      memory.output[i] = claim === null ? 0 : held ? SEEN_SHUTDOWN : SEEN_PASSING;
      memory.outputSince[i] = held ? atS - 240 : dawnS;
    });
    const count = (state: number | undefined) => memory.state.filter((s) => s === state).length;
    yield [
      of.id,
      of.siteId,
      instant(atS),
      instant(atS),
      arrayField(memory.state),
      arrayField(memory.verdict),
      arrayField(memory.since),
      '{"units":{},"finding":null}',
      JSON.stringify({ memory, serials: of.serials }),
      count(passing),
      count(shutdown),
      count(silent),
      memory.verdict.filter((v) => v === stuck).length,
    ].join('\t');
  }
}
