import type { Knex } from 'knex';
import { codeOf, UNIT_STATES, VERDICTS } from '../../src/domain/verdicts/codes';
import { newMemory, SEEN_PASSING, SEEN_SHUTDOWN } from '../../src/domain/verdicts/memory';
import { frameAt, lightAt, loadString, type LoadShape, type LoadString } from '../../simulator/load/frames';
import type { Frame } from '../../src/schemas/ingest';
import { arrayField, CopyInto, instant } from '../history/copy';
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

/** Frames of each lit minute from `fromS` until `untilS`, string by string in order of time within an hour. */
export async function writeFrames(
  tx: Knex.Transaction,
  seats: readonly Seat[],
  shape: LoadShape,
  fromS: number,
  untilS: number,
): Promise<number> {
  const copy = await CopyInto.open(tx, 'string_frame', FRAME_COLUMNS);
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
  for (let atS = Math.ceil(fromS / 60) * 60; atS <= untilS; atS += 60) {
    if (lightAt(shape, atS) <= 0.02) continue;
    const at = instant(atS);
    for (const { of, load } of seats) {
      copy.write(`${at}\t${of.id}\t${text(load, atS)}`);
      await copy.breathe();
    }
  }
  await copy.close();
  return copy.rows;
}

/** Quarters of an hour from `fromS` until `untilS`. */
export async function writeQuarters(
  tx: Knex.Transaction,
  seats: readonly Seat[],
  shape: LoadShape,
  fromS: number,
  untilS: number,
): Promise<number> {
  const copy = await CopyInto.open(tx, 'string_quarter', QUARTER_COLUMNS);
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
  for (let atS = Math.ceil(fromS / QUARTER_S) * QUARTER_S; atS < untilS; atS += QUARTER_S) {
    if (lightAt(shape, atS) <= 0.02) continue;
    const at = instant(atS);
    for (const { of, load } of seats) {
      copy.write(`${at}\t${of.id}\t${text(load, atS)}`);
      await copy.breathe();
    }
  }
  await copy.close();
  return copy.rows;
}

/** The newest frame of each string, and what is concluded of it: as if judgement had followed it up to there. */
export async function writeNewest(
  tx: Knex.Transaction,
  seats: readonly Seat[],
  shape: LoadShape,
  atS: number,
): Promise<void> {
  const states = await CopyInto.open(tx, 'string_state', [
    'string_id',
    'site_id',
    ...FRAME_COLUMNS.filter((c) => c !== 'string_id'),
    'seen',
  ]);
  for (const { of, load } of seats) {
    const f = frameAt(shape, load, atS, false);
    const row = [mask(f), sum(volts(f)), power(f)];
    const arrays = [volts(f), f.current, f.temperature, f.signal, f.via, f.state].map(arrayField);
    const seen = arrayField(f.state.map((s) => (s === null ? 0 : atS)));
    states.write([of.id, of.siteId, instant(atS), ...row, ...arrays, seen].join('\t'));
    await states.breathe();
  }
  await states.close();

  const judged = await CopyInto.open(tx, 'string_judgement', [
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
  ]);
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
    judged.write(
      [
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
      ].join('\t'),
    );
    await judged.breathe();
  }
  await judged.close();
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
