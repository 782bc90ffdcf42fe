import { setImmediate as turn } from 'node:timers/promises';
import { groupedBy } from '../../domain/grouped-by';
import { EXCLUDED, type PlaneSeries, type StringSeries } from '../../domain/output/plane-reference';
import { median } from '../../domain/output/robust';
import { solarPositionQuick } from '../../domain/photovoltaics/sun/position-quick';
import type { Place } from '../../domain/photovoltaics/sun/position';
import type { Tx } from '../db/transaction';
import {
  commandsIn,
  dayBounds,
  inputQuarters,
  inverterQuarters,
  lightQuarters,
  outputStrings,
  quartersIn,
  stringQuarters,
  worksIn,
  type OutputString,
  type QuarterRow,
  type Span,
} from '../queries/output-series';

/** A site's last days as the night's judgements take them, from what the database holds. */

const STEP_S = 900;
/** A quarter counts with so many of the reports due. */
const REPORTS_MIN = 2 / 3;
/** What a cell is warmer than its back sheet, °C: Sandia (King 2004) at some 600 W/m², open rack. */
const CELL_OVER_MODULE = 1.5;
/** After a release units and inverters take their time. */
const AFTER_RELEASE_S = 900;

/** One string as a night looks at it; columns run over the plane's steps, NaN: not known. */
export interface NightString {
  string: OutputString;
  /** V and A by unit. */
  voltage: Float64Array[];
  current: Float64Array[];
  /** V over the string. */
  sumV: Float64Array;
  /** V of the module side, of optimizing units. */
  voltageIn: Float64Array[] | null;
  typicalA: Float64Array;
  excluded: Uint8Array;
}
export interface NightPlane {
  planeId: number;
  series: PlaneSeries;
  /** The strings of each of `series.strings`: several where they share an input and tell nothing themselves. */
  members: OutputString[][];
}
export interface NightSeries {
  /** Local days, yyyy-mm-dd, and where each begins, epoch s; one more for the end. */
  days: string[];
  boundsS: number[];
  steps: number;
  dayOf: Int16Array;
  planes: NightPlane[];
  strings: NightString[];
}

export interface SeriesSite extends Place {
  id: number;
  reportIntervalS: number;
}

/** Rows after which others of the process have their turn. */
const TAKEN_AT_ONCE = 1000;

const nans = (n: number): Float64Array => new Float64Array(n).fill(NaN);

/** The `count` local days of a site that end with `last`. */
export async function readNightSeries(
  tx: Tx,
  site: SeriesSite,
  last: string,
  count: number,
): Promise<NightSeries> {
  const bounds = await dayBounds(tx, site.id, last, count);
  const boundsS = bounds.map((b) => b.fromS);
  const days = bounds.slice(0, -1).map((b) => b.day);
  const fromS = boundsS[0] ?? 0;
  const steps = Math.max(0, Math.round(((boundsS.at(-1) ?? 0) - fromS) / STEP_S));
  const span: Span = { from: new Date(fromS * 1000), to: new Date((fromS + steps * STEP_S) * 1000) };
  const grid = gridOf(site, boundsS, steps);
  const stepOf = (atS: number): number => Math.floor((atS - fromS) / STEP_S);
  const strings = await outputStrings(tx, site.id);
  const excluded = await exclusions(tx, site.id, strings, span, steps, stepOf);
  const telling = strings.filter((s) => s.kind !== 'shutdown_only');
  const night = telling.map((string): NightString => ({
    string,
    voltage: Array.from({ length: string.slots }, () => nans(steps)),
    current: Array.from({ length: string.slots }, () => nans(steps)),
    voltageIn: null,
    sumV: nans(steps),
    typicalA: nans(steps),
    excluded: excluded.get(string.id) ?? new Uint8Array(steps),
  }));
  const byId = new Map(night.map((n) => [n.string.id, n]));
  const energy = new Map(night.map((n) => [n.string.id, nans(steps)]));
  const due = STEP_S / site.reportIntervalS;
  const least = Math.max(1, REPORTS_MIN * due);
  let taken = 0;
  for (const row of await stringQuarters(tx, [...byId.keys()], span)) {
    if (++taken % TAKEN_AT_ONCE === 0) await turn();
    const n = byId.get(row.stringId);
    const q = stepOf(row.atS);
    // arrays of another length are of another as-built
    if (!n || row.frames < least || (row.voltage && row.voltage.length !== n.string.slots)) continue;
    const minutes = Math.min(15, (row.frames * site.reportIntervalS) / 60);
    const watts = row.energy / 10 / minutes;
    take(n, row, q, watts);
    energy.get(row.stringId)![q] = n.string.measures === 'input' ? watts : wholeWatts(n, row, q, watts);
  }
  await takeInputSides(tx, night, span, stepOf);
  const inputs = await readInputs(tx, strings, span, steps, stepOf, least);
  const light = new Map<number, { poa: Float64Array; cell: Float64Array }>();
  for (const row of await lightQuarters(tx, site.id, span)) {
    const q = stepOf(row.atS);
    const of = light.get(row.planeId) ?? { poa: nans(steps), cell: nans(steps) };
    light.set(row.planeId, of);
    of.poa[q] = row.poaGlobal ?? NaN;
    of.cell[q] = row.temperatureModule === null ? NaN : row.temperatureModule + CELL_OVER_MODULE;
  }
  const planes = [...new Set(strings.map((s) => s.planeId))].map((planeId): NightPlane => {
    const here = strings.filter((s) => s.planeId === planeId);
    const own = here.flatMap((string): [StringSeries, OutputString[]][] => {
      const n = byId.get(string.id);
      if (!n) return [];
      const input = inputs.get(string.inputId);
      const alone = strings.filter((s) => s.inputId === string.inputId).length === 1;
      const tells = string.measures !== 'input';
      const voltage = tells ? n.sumV : alone && input ? input.voltage : nans(steps);
      const power = energy.get(string.id)!;
      return [[seriesOf(string, 'string', { voltage, current: n.typicalA, power }, n.excluded), [string]]];
    });
    const silent = groupedBy(
      here.filter((s) => s.kind === 'shutdown_only'),
      (s) => s.inputId,
    );
    const shared = [...silent].flatMap(([inputId, members]): [StringSeries, OutputString[]][] => {
      const columns = inputs.get(inputId);
      const whole = strings.filter((s) => s.inputId === inputId).length === members.length;
      if (!columns || !whole) return [];
      const bits = new Uint8Array(steps);
      for (const m of members) excluded.get(m.id)?.forEach((e, q) => (bits[q]! |= e));
      return [[jointSeries(members, columns, bits), members]];
    });
    const all = [...own, ...shared];
    const of = light.get(planeId);
    const weights = here.reduce((sum, s) => sum + s.powerRef, 0);
    return {
      planeId,
      members: all.map(([, m]) => m),
      series: {
        stepH: STEP_S / 3600,
        dayOf: grid.dayOf,
        days: days.length,
        poaGlobal: of?.poa ?? nans(steps),
        temperatureCell: of?.cell ?? nans(steps),
        sunAzimuth: grid.sunAzimuth,
        gammaPmp: here.reduce((sum, s) => sum + s.gammaPmp * s.powerRef, 0) / weights,
        strings: all.map(([s]) => s),
      },
    };
  });
  return { days, boundsS, steps, dayOf: grid.dayOf, planes, strings: night };
}

/** Which local day each quarter belongs to, by its middle; −1 at night. Days of 92 and 100 quarters are as long as they are. */
function gridOf(
  place: Place,
  boundsS: readonly number[],
  steps: number,
): { dayOf: Int16Array; sunAzimuth: Float64Array } {
  const dayOf = new Int16Array(steps).fill(-1);
  const sunAzimuth = new Float64Array(steps);
  let day = 0;
  for (let q = 0; q < steps; q++) {
    const atS = (boundsS[0] ?? 0) + (q + 0.5) * STEP_S;
    while (day + 1 < boundsS.length - 1 && atS >= boundsS[day + 1]!) day++;
    const sun = solarPositionQuick(atS * 1000, place);
    sunAzimuth[q] = sun.azimuth;
    if (sun.elevation > 0) dayOf[q] = day;
  }
  return { dayOf, sunAzimuth };
}

/**
 * What the whole string gave, W: the sum over reported units, which in shade is less than mean voltage times mean
 * current, raised by the voltage of those whose report is missing. NaN: too little is known. Of units that tell their
 * module's side only, what passes is known by their claims alone.
 */
function wholeWatts(n: NightString, row: QuarterRow, q: number, watts: number): number {
  const reported = row.voltageAvg / 100;
  const whole = n.sumV[q]! + 0 * n.typicalA[q]!;
  return reported > 0 ? (watts * whole) / reported : whole * n.typicalA[q]!;
}

function take(n: NightString, row: QuarterRow, q: number, watts: number): void {
  const { voltage, current } = row;
  if (voltage === null || current === null) {
    // older days are kept of whole strings only
    n.sumV[q] = row.voltageAvg / 100;
    n.typicalA[q] = row.voltageAvg > 0 ? watts / n.sumV[q] : NaN;
    return;
  }
  const known: number[] = [];
  let sum = 0;
  voltage.forEach((cV, u) => {
    const mA = current[u];
    sum += cV === null ? NaN : cV / 100;
    if (cV !== null) n.voltage[u]![q] = cV / 100;
    if (mA === null || mA === undefined) return;
    n.current[u]![q] = mA / 1000;
    known.push(mA / 1000);
  });
  n.sumV[q] = sum;
  if (known.length >= n.string.slots / 2) n.typicalA[q] = median(known);
}

async function takeInputSides(
  tx: Tx,
  night: NightString[],
  span: Span,
  stepOf: (atS: number) => number,
): Promise<void> {
  const optimizing = night.filter((n) => n.string.kind === 'optimizing' && n.string.measures !== 'output');
  if (optimizing.length === 0) return;
  const byId = new Map(optimizing.map((n) => [n.string.id, n]));
  for (const n of optimizing) n.voltageIn = n.voltage.map((v) => nans(v.length));
  // three days are enough for single units, and raw reports are many
  const from = new Date(Math.max(span.from.getTime(), span.to.getTime() - 4 * 86_400_000));
  for (const row of await quartersIn(tx, [...byId.keys()], { from, to: span.to })) {
    const columns = byId.get(row.stringId)?.voltageIn;
    row.voltage.forEach((cV, u) => {
      const column = columns?.[u];
      if (column && cV !== null) column[stepOf(row.atS)] = cV / 100;
    });
  }
}

interface InputColumns {
  voltage: Float64Array;
  current: Float64Array;
  power: Float64Array;
}

/** Of inputs whose strings don't tell all themselves. */
async function readInputs(
  tx: Tx,
  strings: readonly OutputString[],
  span: Span,
  steps: number,
  stepOf: (atS: number) => number,
  least: number,
): Promise<Map<number, InputColumns>> {
  const wanted = strings.filter((s) => s.kind === 'shutdown_only' || s.measures === 'input');
  const columns = new Map<number, InputColumns>(
    wanted.map((s) => [s.inputId, { voltage: nans(steps), current: nans(steps), power: nans(steps) }]),
  );
  if (columns.size === 0) return columns;
  for (const row of await inputQuarters(tx, [...columns.keys()], span)) {
    const of = columns.get(row.inputId);
    if (!of || row.frames < least) continue;
    const q = stepOf(row.atS);
    of.voltage[q] = row.voltage ?? NaN;
    of.current[q] = row.current ?? NaN;
    of.power[q] = row.power ?? NaN;
  }
  return columns;
}

function seriesOf(
  s: OutputString,
  scope: StringSeries['scope'],
  columns: InputColumns,
  excluded: Uint8Array,
): StringSeries {
  return {
    id: String(s.id),
    name: s.name,
    scope,
    units: s.slots,
    bypassGroups: s.bypassGroups,
    powerRef: s.powerRef,
    ...columns,
    excluded,
    ownBaseline: null,
  };
}

function jointSeries(
  members: readonly OutputString[],
  columns: InputColumns,
  excluded: Uint8Array,
): StringSeries {
  const first = members[0]!;
  const scope = members.length === 1 ? 'string' : 'input';
  return {
    ...seriesOf(first, scope, columns, excluded),
    name: members.map((m) => m.name).join(' and '),
    // strings in parallel have one voltage: that of the units of one
    units: members.reduce((sum, m) => sum + m.slots, 0),
    powerRef: members.reduce((sum, m) => sum + m.powerRef, 0),
  };
}

/** Why quarters of each string don't count: limits of its inverter, commanded shutdown, planned works. */
async function exclusions(
  tx: Tx,
  siteId: number,
  strings: readonly OutputString[],
  span: Span,
  steps: number,
  stepOf: (atS: number) => number,
): Promise<Map<number, Uint8Array>> {
  const bits = new Map(strings.map((s) => [s.id, new Uint8Array(steps)]));
  const byInverter = groupedBy(strings, (s) => s.inverterId);
  for (const row of await inverterQuarters(tx, siteId, span)) {
    const bit =
      (row.curtailed ? EXCLUDED.curtailed : 0) |
      (row.gridLost ? EXCLUDED.gridLost : 0) |
      (row.clipped ? EXCLUDED.clipped : 0);
    for (const s of byInverter.get(row.inverterId) ?? []) bits.get(s.id)![stepOf(row.atS)]! |= bit;
  }
  const mark = (id: number, fromS: number, toS: number): void => {
    const column = bits.get(id);
    if (!column) return;
    for (let q = Math.max(0, stepOf(fromS)); q <= Math.min(steps - 1, stepOf(toS)); q++)
      column[q]! |= EXCLUDED.shutdown;
  };
  const endS = span.to.getTime() / 1000;
  const points = await commandsIn(tx, siteId, span);
  const shut = (of: (p: (typeof points)[number]) => boolean): [number, number][] => {
    const own = points.filter(of);
    return own.flatMap((p, i): [number, number][] =>
      p.released ? [] : [[p.sinceS, (own[i + 1]?.sinceS ?? endS) + AFTER_RELEASE_S]],
    );
  };
  for (const s of strings) {
    const spans = [
      ...shut((p) => p.zoneId === s.zoneId),
      ...s.transmitterIds.flatMap((id) => shut((p) => p.transmitterId === id)),
    ];
    for (const [fromS, toS] of spans) mark(s.id, fromS, toS);
  }
  for (const work of await worksIn(tx, siteId, span))
    for (const s of strings)
      if (work.stringIds === null || work.stringIds.includes(s.id)) mark(s.id, work.fromS, work.toS);
  return bits;
}
