import type { ModuleType } from '../../domain/equipment/module-type';
import { findingWords } from '../../domain/causes/string-finding';
import { expectedBand, expectedModule, type Expected } from '../../domain/output/expected';
import { expectedFromWords } from '../../domain/output/plane-words';
import { median } from '../../domain/output/robust';
import { clearSkyInPlane } from '../../domain/photovoltaics/irradiance/clear-sky-plane';
import { UNIT_STATES, VERDICTS } from '../../domain/verdicts/codes';
import { DARK_BELOW_ELEVATION } from '../../domain/verdicts/context';
import type { CommandNow, Counts, SlotNow, StringNow } from '../../schemas/api/now';
import type { SaidRow, SiteRow, StringRow } from './now-rows';

/** From database rows to what holds now. Pure: the instant is an argument. */

/** A, above which a string is under load. */
const LOAD_FROM = 0.1;
const isoOf = (seconds: number | null | undefined): string | null =>
  seconds ? new Date(seconds * 1000).toISOString() : null;
const medianOf = (values: readonly number[]): number | null => (values.length > 0 ? median(values) : null);
const scaled = (value: number | null | undefined, by: number): number | null =>
  value === null || value === undefined ? null : value / by;

export function countsOf(slots: readonly SlotNow[]): Counts {
  const of = (test: (slot: SlotNow) => boolean) => slots.filter((s) => s.serial !== null && test(s)).length;
  return {
    units: of(() => true),
    passing: of((s) => s.state === 'passing'),
    shutdown: of((s) => s.state === 'shutdown'),
    unheard: of((s) => s.state === 'unheard'),
    silent: of((s) => s.state === 'silent'),
    dark: of((s) => s.state === 'dark'),
    stuck: of((s) => s.verdict === 'stuck'),
    notShuttingDown: of((s) => s.verdict === 'not_shutting_down'),
    unconfirmed: of((s) => s.verdict === 'unconfirmed'),
  };
}

/** What is in force for a string: its zone's command, or a transmitter's of its own that is off while the zone is not. */
export function commandOf(
  said: readonly SaidRow[],
  string: Pick<StringRow, 'id' | 'zoneId' | 'kind'>,
): CommandNow | null {
  const zone = said.find((s) => s.zoneId === string.zoneId);
  const hears = string.kind === 'shutdown_only' ? said.filter((s) => s.stringIds?.includes(string.id)) : [];
  const off = hears.length > 0 && hears.every((t) => t.inForce !== 'released') ? hears[0] : undefined;
  const row = zone && zone.inForce !== 'released' ? zone : (off ?? zone);
  return row
    ? {
        where: row.name,
        whereKind: row.zoneId === null ? 'transmitter' : 'zone',
        inForce: row.inForce,
        since: new Date(row.since).toISOString(),
        by: row.by,
      }
    : null;
}

interface Measured {
  row: StringRow;
  slots: SlotNow[];
  /** Voltages of passing units, V; one a unit where the type tells, the input's share where it tells nothing. */
  passing: number[];
  /** Their median. */
  typical: number | null;
  underLoad: boolean;
}

function slotsOf(row: StringRow, gateways: ReadonlyMap<string, string>): SlotNow[] {
  const measuresOutput = row.measures === 'output' || row.measures === 'both';
  return row.positions.map((position, nth): SlotNow => {
    const i = position - 1;
    const serial = row.serials[nth] ?? null;
    // what was reported from this slot before its unit came there is another's
    const own = (row.seen?.[i] ?? 0) >= (row.placedAt[nth] ?? 0);
    const stateCode = row.state?.[i] ?? null;
    const verdictCode = row.verdict?.[i] ?? null;
    const told = serial !== null && row.kind !== 'shutdown_only';
    const seenAt = own ? (row.seen?.[i] ?? 0) : 0;
    const state = told ? (stateCode === null ? 'unheard' : (UNIT_STATES[stateCode] ?? null)) : null;
    const voltage = measuresOutput && own ? scaled(row.voltage?.[i], 100) : null;
    const voltageIn = own
      ? scaled(row.voltageIn?.[i] ?? (row.measures === 'input' ? row.voltage?.[i] : null), 100)
      : null;
    const current = own ? scaled(row.current?.[i], 1000) : null;
    const via = own ? (row.via?.[i] ?? null) : null;
    return {
      position,
      serial,
      roofPlace: row.roofPlaces[nth] ?? '',
      state,
      verdict: serial === null || verdictCode === null ? null : (VERDICTS[verdictCode] ?? null),
      since: serial === null ? null : isoOf(row.since?.[i]),
      seen: serial === null ? null : isoOf(seenAt),
      voltage,
      voltageIn,
      current,
      power:
        (own ? scaled(row.power?.[i], 10) : null) ??
        (voltage !== null && current !== null ? voltage * current : null),
      temperature: own ? scaled(row.temperature?.[i], 10) : null,
      signal: own ? (row.signal?.[i] ?? null) : null,
      gateway:
        via === null || row.loggerId === null
          ? null
          : (gateways.get(`${row.loggerId} ${via}`) ?? `Gateway ${via}`),
      assumed: told && !measuresOutput && (state === 'passing' || state === 'shutdown'),
      expected: null,
    };
  });
}

function measure(row: StringRow, gateways: ReadonlyMap<string, string>): Measured {
  const slots = slotsOf(row, gateways);
  const units = slots.filter((s) => s.serial !== null).length;
  const fresh = slots.filter((s) => s.state === 'passing');
  const currents = slots.flatMap((s) =>
    (s.state === 'passing' || s.state === 'shutdown') && s.current !== null ? [s.current] : [],
  );
  const inputVoltage = scaled(row.inputVoltage, 10);
  const passing =
    row.kind === 'shutdown_only'
      ? inputVoltage !== null && inputVoltage > 10 * units && !row.finding
        ? [inputVoltage / Math.max(1, units)]
        : []
      : fresh.flatMap((s) => {
          const v = s.voltage ?? s.voltageIn;
          return v === null ? [] : [v];
        });
  const current = medianOf(currents) ?? scaled(row.inputCurrent, 100) ?? 0;
  return { row, slots, passing, typical: medianOf(passing), underLoad: current > LOAD_FROM };
}

interface Around {
  site: SiteRow;
  gateways: ReadonlyMap<string, string>;
  all: Measured[];
  /** A clear sky in each plane, by the plane's number. */
  sky: ReadonlyMap<number, ReturnType<typeof clearSkyInPlane>>;
  at: Date;
}

function expectationOf(own: Measured, around: Around): Expected | null {
  const { site, all, at } = around;
  const plane = site.planes.find((p) => p.id === own.row.planeId);
  const module = site.modules.find((m) => m.id === own.row.moduleTypeId) as ModuleType | undefined;
  if (!plane || !module) return null;
  const recent = (time: string) => at.getTime() - new Date(time).getTime() < 15 * 60_000;
  const weather = site.weather.filter((w) => recent(w.at));
  const inPlane = weather.find((w) => w.kind === 'poa_global' && w.planeId === plane.id);
  const others = all.filter(
    (m) =>
      m !== own &&
      // an inverter at its limit raises the voltage of all its inputs: another's strings are no yardstick
      m.row.inverter === own.row.inverter &&
      m.row.planeId === own.row.planeId &&
      m.row.moduleTypeId === own.row.moduleTypeId &&
      m.underLoad === own.underLoad &&
      (m.row.kind === 'optimizing') === (own.row.kind === 'optimizing'),
  );
  return expectedModule({
    module,
    underLoad: own.underLoad,
    otherStrings: others.flatMap((m) => m.typical ?? []),
    ownUnits: own.row.kind === 'shutdown_only' ? [] : own.passing,
    poaMeasured: inPlane?.irradiance ?? null,
    poaClear: around.sky.get(plane.id)?.poaGlobal ?? 0,
    temperatureCellMeasured: scaled(weather.find((w) => w.temperatureModule !== null)?.temperatureModule, 10),
    temperatureAir: scaled(weather.find((w) => w.temperatureAir !== null)?.temperatureAir, 10),
  });
}

function voltageOf(own: Measured): number | null {
  const { row, slots } = own;
  if (row.kind === 'shutdown_only') return scaled(row.inputVoltage, 10);
  const values = slots.flatMap((s) => {
    if (s.state !== 'passing' && s.state !== 'shutdown') return [];
    if (!s.assumed) return s.voltage ?? [];
    if (s.state === 'passing') return s.voltageIn ?? [];
    return own.underLoad ? row.bypassVoltage : row.shutdownVoltage;
  });
  return values.length > 0 ? values.reduce((a, b) => a + b, 0) : null;
}

function mapped(own: Measured, around: Around): StringNow {
  const { row, slots } = own;
  const plane = around.site.planes.find((p) => p.id === row.planeId);
  const sun = around.sky.get(row.planeId);
  const units = slots.filter((s) => s.serial !== null);
  const dark =
    units.length > 0 && units.every((s) => s.state === 'dark')
      ? true
      : !!sun && sun.elevation < DARK_BELOW_ELEVATION && units.every((s) => s.state !== 'passing');
  const expected = dark ? null : expectationOf(own, around);
  const withExpected = slots.map((s) =>
    s.serial === null || !expected ? s : { ...s, expected: expected.voltage },
  );
  const voltage = voltageOf(own);
  const currents = slots.flatMap((s) =>
    (s.state === 'passing' || s.state === 'shutdown') && s.current !== null ? [s.current] : [],
  );
  const alone = row.inputStrings === 1;
  const inputCurrent = scaled(row.inputCurrent, 100);
  const current = medianOf(currents) ?? (row.kind === 'shutdown_only' && alone ? inputCurrent : null);
  const command = commandOf(around.site.said, row);
  const inForce = command !== null && command.inForce !== 'released' && !dark;
  const told = units.some((s) => s.state === 'passing' || s.state === 'shutdown');
  return {
    id: row.ref,
    name: row.name,
    kind: row.kind,
    at: (row.kind === 'shutdown_only' ? row.inputAt : row.at)?.toISOString() ?? null,
    slots: withExpected,
    counts: countsOf(withExpected),
    voltage,
    current,
    power:
      (told && row.kind === 'optimizing' ? scaled(row.powerSum, 10) : null) ??
      (voltage !== null && current !== null ? voltage * current : null),
    expectedVoltage: expected ? expected.voltage * units.length : null,
    expectedBand: expected ? expectedBand(expected, units.length) : null,
    expectedInShutdown: inForce ? units.length * row.shutdownVoltage : null,
    expectedFrom: expected ? expectedFromWords(expected.from, plane?.name ?? null) : '',
    expectedStrings: expected?.strings ?? 0,
    command,
    dark,
    input: {
      inverter: row.inverter,
      number: row.inputNumber,
      voltage: scaled(row.inputVoltage, 10),
      current: inputCurrent,
      strings: row.inputStrings,
    },
    finding:
      row.finding && row.findingSince
        ? {
            kind: row.finding,
            since: row.findingSince.toISOString(),
            words: findingWords(row.finding, row.evidence?.finding ?? null),
          }
        : null,
  };
}

/** The strings of one site that are `wanted` (absent: all), in the order of the rows. */
export function mapStrings(
  site: SiteRow,
  rows: readonly StringRow[],
  at: Date,
  wanted?: ReadonlySet<number>,
): StringNow[] {
  const gateways = new Map(site.gateways.map((g) => [`${g.loggerId} ${g.number}`, g.name]));
  const all = rows.map((row) => measure(row, gateways));
  const sky = new Map(site.planes.map((p) => [p.id, clearSkyInPlane(at.getTime(), { ...site, ...p })]));
  const around: Around = { site, gateways, all, sky, at };
  return all.filter((m) => !wanted || wanted.has(m.row.id)).map((m) => mapped(m, around));
}
