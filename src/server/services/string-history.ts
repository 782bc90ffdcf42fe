import { expectedHistory, type ExpectedHistory } from '../../domain/output/expected-history';
import { moduleVoltage } from '../../domain/output/expected';
import { clearSkyInPlane } from '../../domain/photovoltaics/irradiance/clear-sky-plane';
import { median } from '../../domain/output/robust';
import { sunRiseSet } from '../../domain/photovoltaics/sun/rise-set';
import { commandWords, eventWords } from '../../domain/verdicts/event-words';
import type {
  ChartMark,
  HistoryQuery,
  HistoryRange,
  StringHistory,
  StringUnits,
  UnitsQuery,
} from '../../schemas/api/string';
import type { Tx } from '../db/transaction';
import { AppError } from '../errors';
import { planeWords } from '../../domain/output/plane-words';
import { siblingsOf, stringFacts, type StringFacts } from '../queries/string-facts';
import {
  commandsOfZone,
  dayBounds,
  eventsOfString,
  inputHistory,
  siblingHistory,
  stringDays,
  stringMinutes,
  stringQuarters,
  unitMinutes,
  type HistoryPoint,
} from '../queries/string-history';

const DAYS: Record<HistoryRange, number> = { day: 1, week: 7, month: 31, year: 366 };
const HOUR_S = 3600;
const DAY_S = 24 * HOUR_S;
type Resolution = StringHistory['resolution'];

export const noSuchString = (): AppError =>
  new AppError('not_found', { message: 'No such string. Check the link, or go back to the fleet.' });

interface Plan {
  from: Date;
  to: Date;
  resolution: Resolution;
  stepS: number;
}

/** How finely a stretch of time is read: never more than some two thousand points. */
function planFor(from: Date, to: Date, reportIntervalS: number): Plan {
  const spanS = (to.getTime() - from.getTime()) / 1000;
  if (spanS <= 36 * HOUR_S)
    return {
      from,
      to,
      resolution: 'minute',
      stepS: spanS <= 6 * HOUR_S ? reportIntervalS : Math.max(60, reportIntervalS),
    };
  if (spanS <= 45 * DAY_S) return { from, to, resolution: 'quarter', stepS: 900 };
  return { from, to, resolution: 'day', stepS: DAY_S };
}

async function read(tx: Tx, facts: StringFacts, plan: Plan): Promise<HistoryPoint[]> {
  if (facts.kind === 'shutdown_only')
    return inputHistory(tx, facts.inputId, plan, Math.min(DAY_S, Math.max(plan.stepS, 60)));
  if (plan.resolution === 'minute') return stringMinutes(tx, facts.id, plan, plan.stepS);
  if (plan.resolution === 'quarter') return stringQuarters(tx, facts.id, plan);
  return stringDays(tx, facts.id, plan, facts.timeZone);
}

/** V of a passing module under load by its datasheet under an ordinary sky; null while it is too dark to say. */
function modelOf(facts: StringFacts): (at: number) => number | null {
  if (facts.kind === 'optimizing') return () => null; // the inverter sets the voltage of such a string
  return (at) => {
    const { poaGlobal } = clearSkyInPlane(at * 1000, facts);
    if (poaGlobal < 40) return null;
    return moduleVoltage(
      { module: facts.module, underLoad: true, temperatureCellMeasured: null, temperatureAir: null },
      poaGlobal * 0.6,
    );
  };
}

const FROM_WORDS: Record<ExpectedHistory['from'], (facts: StringFacts) => string> = {
  siblings: (f) => `other strings on the ${planeWords(f.planeName)}`,
  siblings_and_model: (f) =>
    `other strings on the ${planeWords(f.planeName)}; where they tell nothing, the datasheet under a clear sky`,
  model: () => 'the datasheet under a clear sky, so the band is wide',
  nothing: () => '',
};

async function expectedOver(tx: Tx, facts: StringFacts, plan: Plan): Promise<StringHistory['expected']> {
  const stepS = plan.resolution === 'minute' ? Math.max(300, plan.stepS) : plan.stepS;
  const offset = plan.resolution === 'quarter' ? 450 : 0;
  const siblings = await siblingHistory(tx, await siblingsOf(tx, facts), plan, {
    resolution: plan.resolution,
    stepS,
    timeZone: facts.timeZone,
    passingFrom: facts.module.vmpRef * 0.5,
  });
  const shifted = siblings.map((s) => ({ ...s, at: s.at + offset }));
  const start = Math.floor(plan.from.getTime() / 1000 / stepS) * stepS + offset;
  const end = plan.to.getTime() / 1000;
  const grid =
    plan.resolution === 'day'
      ? shifted.map((s) => s.at)
      : Array.from({ length: Math.max(0, Math.ceil((end - start) / stepS)) }, (_, i) => start + i * stepS);
  const band = expectedHistory({
    grid,
    siblings: shifted,
    model: plan.resolution === 'day' ? () => null : modelOf(facts),
    units: facts.units,
    bareModel: true,
  });
  return { at: band.at, low: band.low, high: band.high, from: FROM_WORDS[band.from](facts) };
}

/** Between sunset and sunrise, for stretches of up to ten days. */
export function nightsOf(
  place: { latitude: number; longitude: number },
  from: Date,
  to: Date,
): [number, number][] {
  if (to.getTime() - from.getTime() > 10 * DAY_S * 1000) return [];
  const edges: { at: number; up: boolean }[] = [];
  let upAllDay: boolean | null = null;
  for (let day = from.getTime() - DAY_S * 1000; day <= to.getTime() + DAY_S * 1000; day += DAY_S * 1000) {
    const { sunrise, sunset, sunUp } = sunRiseSet(day, place, { beyondDay: 'actual' });
    if (sunrise !== null) edges.push({ at: sunrise, up: true });
    if (sunset !== null) edges.push({ at: sunset, up: false });
    if (sunUp !== 'rises_and_sets') upAllDay = sunUp === 'all_day';
  }
  edges.sort((a, b) => a.at - b.at);
  const start = from.getTime();
  const end = to.getTime();
  const before = edges.findLast((e) => e.at <= start);
  let up = before?.up ?? upAllDay ?? true;
  let since = start;
  const nights: [number, number][] = [];
  for (const edge of [...edges.filter((e) => e.at > start && e.at < end), { at: end, up: !up }]) {
    if (!up && edge.at > since) nights.push([Math.round(since / 1000), Math.round(edge.at / 1000)]);
    up = edge.up;
    since = edge.at;
  }
  return nights;
}

/** Commands as stretches, what happened to the units as instants. */
async function marksOf(tx: Tx, facts: StringFacts, plan: Plan, now: Date): Promise<ChartMark[]> {
  const commands = await commandsOfZone(tx, facts.zoneId, plan);
  const from = plan.from.getTime() / 1000;
  const to = Math.min(plan.to.getTime(), now.getTime()) / 1000;
  const stretches = commands.flatMap((c, i): ChartMark[] => {
    if (c.inForce === 'released') return [];
    const since = Math.max(from, c.since.getTime() / 1000);
    const until = Math.min(to, (commands[i + 1]?.since.getTime() ?? Infinity) / 1000);
    return until > since ? [{ from: since, to: until, words: commandWords(c.inForce), tone: 'plum' }] : [];
  });
  const events = await eventsOfString(tx, facts, plan, 60);
  const instants = events
    .filter((e) => e.kind !== 'command' && (e.stringId !== null || plan.resolution === 'minute'))
    .map((e): ChartMark => {
      const { words, tone } = eventWords(e.kind, e.detail);
      return { from: new Date(e.at).getTime() / 1000, to: null, words, tone };
    });
  return [...stretches, ...instants].sort((a, b) => a.from - b.from);
}

const SLOWEST_REPORT_S = 600;

/** The spacing beyond which something is missing: from the points themselves, for a logger may report more slowly than its site is set to. */
function gapFrom(at: readonly number[], stepS: number): number {
  const spaces = at.slice(1).map((t, i) => t - (at[i] ?? t));
  const usual = spaces.length > 0 ? Math.min(median(spaces), Math.max(stepS, SLOWEST_REPORT_S)) : stepS;
  return 2.6 * Math.max(stepS, usual);
}

/** Puts a null between points that lie further apart than their step allows, so that a gap is drawn as one. */
export function withGaps(
  points: readonly HistoryPoint[],
  stepS: number,
): Pick<StringHistory, 'at' | 'voltage' | 'low' | 'high' | 'energy'> {
  const out: Pick<StringHistory, 'at' | 'voltage' | 'low' | 'high' | 'energy'> = {
    at: [],
    voltage: [],
    low: [],
    high: [],
    energy: [],
  };
  const gap = gapFrom(
    points.map((p) => p.at),
    stepS,
  );
  let before = -Infinity;
  for (const p of points) {
    if (before > 0 && p.at - before > gap) {
      out.at.push(before + stepS);
      for (const column of [out.voltage, out.low, out.high, out.energy]) column.push(null);
    }
    out.at.push(p.at);
    out.voltage.push(p.voltage);
    out.low.push(p.low);
    out.high.push(p.high);
    out.energy.push(p.energy);
    before = p.at;
  }
  return out;
}

/**
 * A string's voltage over a day, week, month or year, or over a part of it more finely.
 * @throws AppError not_found, or invalid where only one end of a part is given
 */
export async function readHistory(
  tx: Tx,
  ref: string,
  query: HistoryQuery,
  now: Date,
): Promise<StringHistory> {
  const facts = await stringFacts(tx, ref);
  if (!facts) throw noSuchString();
  const bounds = await dayBounds(tx, query.on ?? null, now, facts.timeZone, DAYS[query.range]);
  const part = partOf(query);
  let plan = planFor(part?.from ?? bounds.from, part?.to ?? bounds.to, facts.reportIntervalS);
  let points = await read(tx, facts, plan);
  const notes: string[] = [];
  if (points.length === 0 && plan.resolution === 'minute' && facts.kind !== 'shutdown_only') {
    const coarser: Plan = { ...plan, resolution: 'quarter', stepS: 900 };
    const quarters = await read(tx, facts, coarser);
    if (quarters.length > 0) {
      plan = coarser;
      points = quarters;
      notes.push('Single reports are no longer kept for this day: means of 15 minutes are shown.');
    }
  }
  if (facts.kind === 'shutdown_only')
    notes.push(
      facts.inputStrings > 1
        ? `Measured at the input, which ${facts.inputStrings} strings share: their common voltage.`
        : 'Measured at the input: units of this type report nothing themselves.',
    );
  return {
    range: query.range,
    resolution: plan.resolution,
    from: plan.from.getTime() / 1000,
    to: plan.to.getTime() / 1000,
    timeZone: facts.timeZone,
    ...withGaps(points, plan.stepS),
    expected: await expectedOver(tx, facts, plan),
    nights: nightsOf(facts, plan.from, plan.to),
    marks: await marksOf(tx, facts, plan, now),
    notes,
  };
}

function partOf(query: HistoryQuery): { from: Date; to: Date } | null {
  const { from, to } = query;
  if (from === undefined && to === undefined) return null;
  if (from === undefined || to === undefined || to <= from)
    throw new AppError('invalid', {
      message: 'Give both ends of the part, the earlier one as "from".',
      fields: [
        { field: from === undefined ? 'query.from' : 'query.to', message: 'give both, from before to' },
      ],
    });
  return { from: new Date(from * 1000), to: new Date(to * 1000) };
}

const UNIT: Record<UnitsQuery['quantity'], string> = {
  voltage: 'V',
  current: 'A',
  temperature: '°C',
  power: 'W',
};

/**
 * One quantity of chosen units over one day, report by report (at least a minute apart).
 * @throws AppError not_found
 */
export async function readUnits(tx: Tx, ref: string, query: UnitsQuery, now: Date): Promise<StringUnits> {
  const facts = await stringFacts(tx, ref);
  if (!facts) throw noSuchString();
  const { from, to } = await dayBounds(tx, query.on ?? null, now, facts.timeZone, 1);
  const chosen = query.positions
    ? [...new Set(query.positions.split(',').map(Number))].filter((p) => p >= 1 && p <= facts.slots)
    : Array.from({ length: facts.slots }, (_, i) => i + 1);
  const moduleSide = query.quantity === 'voltage' && facts.measures === 'input';
  const rows = await unitMinutes(tx, facts.id, { from, to }, moduleSide ? 'voltageIn' : query.quantity);
  const at: number[] = [];
  const lines = chosen.map((position) => ({ position, values: [] as (number | null)[] }));
  let before = -Infinity;
  const stepS = Math.max(60, facts.reportIntervalS);
  const gap = gapFrom(
    rows.map((r) => r.at),
    stepS,
  );
  for (const row of rows) {
    if (row.at - before < stepS - 1) continue;
    if (before > 0 && row.at - before > gap) {
      at.push(before + stepS);
      for (const line of lines) line.values.push(null);
    }
    at.push(row.at);
    for (const line of lines) line.values.push(row.values?.[line.position - 1] ?? null);
    before = row.at;
  }
  return {
    quantity: query.quantity,
    unit: UNIT[query.quantity],
    side: moduleSide ? 'module' : 'output',
    from: from.getTime() / 1000,
    to: to.getTime() / 1000,
    timeZone: facts.timeZone,
    at,
    lines,
    nights: nightsOf(facts, from, to),
  };
}
