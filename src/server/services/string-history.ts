import { expectedHistory, type ExpectedHistory } from '../../domain/output/expected-history';
import { moduleVoltage } from '../../domain/output/expected';
import { planeWords } from '../../domain/output/plane-words';
import { clearSkyInPlane } from '../../domain/photovoltaics/irradiance/clear-sky-plane';
import { temperatureCellNoct } from '../../domain/photovoltaics/temperature/cell';
import type { HistoryQuantity, HistoryQuery, HistoryRange, StringHistory } from '../../schemas/api/string';
import type { Tx } from '../db/transaction';
import { AppError } from '../errors';
import type { Sibling, StringFacts } from '../queries/string-facts';
import { importedDays, importedSteps, whereNothingElse } from '../queries/history-readings';
import {
  dayBounds,
  inputDays,
  inputHistory,
  planeLight,
  siblingHistory,
  siblingLines,
  stringDays,
  stringMinutes,
  stringQuarters,
  type HistoryPoint,
} from '../queries/string-history';
import {
  gapFrom,
  knownString,
  marksOf,
  nightsOf,
  planFor,
  withGaps,
  type KnownString,
  type Plan,
} from './string-axis';
import { historyWords } from '../../words/refusals-history';

const DAYS: Record<HistoryRange, number> = { day: 1, week: 7, month: 31, year: 366 };
const DAY_S = 86_400;
/** Reports of so long a time are read themselves where the roll-up keeps no lowest and highest. */
const PEAKS_FROM_REPORTS_S = 8 * DAY_S;
const UNITS: Record<HistoryQuantity, string> = { voltage: 'V', current: 'A', power: 'W' };

async function read(
  tx: Tx,
  facts: StringFacts,
  plan: Plan,
  quantity: HistoryQuantity,
): Promise<HistoryPoint[]> {
  if (facts.kind === 'shutdown_only')
    return plan.resolution === 'day'
      ? inputDays(tx, facts.inputId, plan, facts.timeZone, quantity)
      : inputHistory(tx, facts.inputId, plan, Math.max(plan.stepS, 60), quantity);
  if (plan.resolution === 'minute') return stringMinutes(tx, facts.id, plan, plan.stepS, quantity);
  if (plan.resolution === 'day')
    return quantity === 'current' ? [] : stringDays(tx, facts.id, plan, facts.timeZone, quantity);
  const quarters = await stringQuarters(tx, facts.id, plan, quantity);
  if (quantity === 'voltage' || plan.to.getTime() - plan.from.getTime() > PEAKS_FROM_REPORTS_S * 1000)
    return quarters;
  // the roll-up keeps no peaks of these: they come from the reports, as far as those are kept
  const peaks = new Map(
    (await stringMinutes(tx, facts.id, plan, plan.stepS, quantity)).map((p) => [p.at + plan.stepS / 2, p]),
  );
  return quarters.map((q) => {
    const peak = peaks.get(q.at);
    return peak ? { ...q, low: peak.low, high: peak.high } : q;
  });
}

/** V of a passing module under load by its datasheet under an ordinary sky; null while it is too dark to say. */
export function voltageModel(facts: StringFacts): (at: number) => number | null {
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

/** Air where nothing measures it, °C. */
const AIR_UNKNOWN = 15;

/** A or W of a module under measured light; null where no sensor lies in the plane: a sky that isn't known tells no current. */
function lightModel(
  facts: StringFacts,
  light: readonly { at: number; poaGlobal: number; temperatureModule: number | null }[],
  quantity: 'current' | 'power',
): (at: number) => number | null {
  const { module } = facts;
  const byStep = new Map(light.map((l) => [l.at, l]));
  return (at) => {
    const l = byStep.get(at);
    if (!l || l.poaGlobal < 20) return null;
    const share = l.poaGlobal / 1000;
    if (quantity === 'current') return module.impRef * share;
    const cell = l.temperatureModule ?? temperatureCellNoct(l.poaGlobal, AIR_UNKNOWN, module.noct);
    return module.impRef * module.vmpRef * share * (1 + module.gammaPmp * (cell - 25));
  };
}

const FROM_WORDS: Record<ExpectedHistory['from'], (facts: StringFacts, model: string) => string> = {
  siblings: (f) => historyWords.others(planeWords(f.planeName)),
  siblings_and_model: (f, model) => historyWords.othersElse(planeWords(f.planeName), model),
  model: (_, model) => historyWords.wideBand(model),
  nothing: () => '',
};

/** What others gave is told in steps no finer, s: their middle of single reports says no more, and costs a page more. */
const COMPARED_FROM_S = 300;

interface Compared {
  expected: StringHistory['expected'];
  middle: StringHistory['middle'];
  siblings: StringHistory['siblings'];
}

async function comparedWith(
  tx: Tx,
  facts: StringFacts,
  plan: Plan,
  query: HistoryQuery,
  siblings: readonly Sibling[],
): Promise<Compared> {
  const { quantity } = query;
  const stepS = plan.resolution === 'minute' ? Math.max(COMPARED_FROM_S, plan.stepS) : plan.stepS;
  // to the middle of what a step holds: reports at its beginning and every so often after it, or a quarter's mean
  const offset = { minute: (stepS - facts.reportIntervalS) / 2, quarter: 450, day: 0 }[plan.resolution];
  const options = { resolution: plan.resolution, stepS, timeZone: facts.timeZone, quantity };
  const nothing = plan.resolution === 'day' && quantity === 'current';
  const steps = nothing
    ? []
    : await siblingHistory(tx, siblings, plan, { ...options, passingFrom: facts.module.vmpRef * 0.5 });
  const shifted = steps.map((s) => ({ ...s, at: s.at + offset }));
  const start = Math.floor(plan.from.getTime() / 1000 / stepS) * stepS + offset;
  const end = plan.to.getTime() / 1000;
  const grid =
    plan.resolution === 'day'
      ? shifted.map((s) => s.at)
      : Array.from({ length: Math.max(0, Math.ceil((end - start) / stepS)) }, (_, i) => start + i * stepS);
  const units = quantity === 'current' ? 1 : facts.units;
  const light =
    plan.resolution !== 'day' && quantity !== 'voltage'
      ? (await planeLight(tx, facts.planeId, plan, stepS)).map((l) => ({ ...l, at: l.at + offset }))
      : [];
  const band = expectedHistory({
    grid,
    siblings: shifted,
    model:
      plan.resolution === 'day'
        ? () => null
        : quantity === 'voltage'
          ? voltageModel(facts)
          : lightModel(facts, light, quantity),
    units,
    bareModel: true,
  });
  const each = query.siblings === 'each' && !nothing ? await siblingLines(tx, siblings, plan, options) : [];
  const model =
    quantity === 'voltage' ? historyWords.datasheetUnderClearSky : historyWords.sensorAndDatasheet;
  return {
    expected: {
      at: band.at,
      low: band.low.map((v) => (v === null ? null : Math.max(0, v))),
      high: band.high,
      from: FROM_WORDS[band.from](facts, model),
    },
    middle: {
      at: shifted.map((s) => s.at),
      values: shifted.map((s) => s.typical * units),
      strings: siblings.length,
    },
    siblings: each.flatMap((line) => {
      const sibling = siblings.find((s) => s.id === line.stringId);
      return sibling
        ? [
            {
              id: sibling.ref,
              name: sibling.name,
              at: line.at.map((t) => t + offset),
              values: line.values.map((v) => v * units),
            },
          ]
        : [];
    }),
  };
}

function notesOf(
  facts: StringFacts,
  query: HistoryQuery,
  siblings: readonly Sibling[],
  hasBand: boolean,
): string[] {
  const notes: string[] = [];
  if (facts.kind === 'shutdown_only')
    notes.push(
      facts.inputStrings > 1
        ? historyWords.atSharedInput(facts.inputStrings, query.quantity)
        : historyWords.atInput,
    );
  if (siblings.length === 0)
    notes.push(
      (hasBand ? historyWords.noneAlike : historyWords.noneAlikeNoSensor)(planeWords(facts.planeName)),
    );
  return notes;
}

/** What imported files say of the steps in which nothing was measured here; kWh where a step is a day of power. */
async function importedOver(
  tx: Tx,
  facts: StringFacts,
  plan: Plan,
  quantity: HistoryQuantity,
  measured: readonly HistoryPoint[],
): Promise<{ at: number; value: number }[]> {
  const of = facts.kind === 'shutdown_only' ? { inputId: facts.inputId } : { stringId: facts.id };
  const days = plan.resolution === 'day';
  const points = days
    ? await importedDays(tx, of, plan, quantity, facts.timeZone)
    : await importedSteps(tx, of, plan, quantity, plan.stepS);
  const rest = whereNothingElse(
    points,
    measured.map((p) => p.at),
    plan.stepS,
  );
  return rest.points.flatMap((p) => {
    const value = days && quantity === 'power' ? (p.energy === null ? null : p.energy / 1000) : p.value;
    return value === null ? [] : [{ at: p.at, value }];
  });
}

/**
 * A string's voltage, current or power over a day, week, month or year, or over a part of it more finely.
 * @throws AppError not_found, or invalid where only one end of a part is given
 */
export const readHistory = async (
  tx: Tx,
  ref: string,
  query: HistoryQuery,
  now: Date,
): Promise<StringHistory> => readKnownHistory(tx, await knownString(tx, ref), query, now);

/** The same of a string that was found. @throws AppError invalid */
export async function readKnownHistory(
  tx: Tx,
  { facts, siblings }: KnownString,
  query: HistoryQuery,
  now: Date,
): Promise<StringHistory> {
  const bounds = await dayBounds(tx, query.on ?? null, now, facts.timeZone, DAYS[query.range]);
  const part = partOf(query);
  let plan = planFor(part?.from ?? bounds.from, part?.to ?? bounds.to, facts.reportIntervalS);
  let points = await read(tx, facts, plan, query.quantity);
  const kept: string[] = [];
  if (points.length === 0 && plan.resolution === 'minute' && facts.kind !== 'shutdown_only') {
    const coarser: Plan = { ...plan, resolution: 'quarter', stepS: 900 };
    const quarters = await read(tx, facts, coarser, query.quantity);
    if (quarters.length > 0) {
      plan = coarser;
      points = quarters;
      kept.push(historyWords.meansOnly);
    }
  }
  const imported = await importedOver(tx, facts, plan, query.quantity, points);
  if (plan.resolution === 'day' && query.quantity === 'current') kept.push(historyWords.noSingleCurrent);
  const compared = await comparedWith(tx, facts, plan, query, siblings);
  return {
    range: query.range,
    quantity: query.quantity,
    unit: plan.resolution === 'day' && query.quantity === 'power' ? 'kWh' : UNITS[query.quantity],
    resolution: plan.resolution,
    from: plan.from.getTime() / 1000,
    to: plan.to.getTime() / 1000,
    timeZone: facts.timeZone,
    ...withGaps(points, plan.stepS),
    ...compared,
    imported: gapped(imported, Math.max(900, plan.stepS)),
    nights: nightsOf(facts, plan.from, plan.to),
    marks: await marksOf(tx, facts, plan, now),
    notes: [
      ...kept,
      ...notesOf(facts, query, siblings, compared.expected.from !== ''),
      ...(imported.length > 0 ? [historyWords.imported] : []),
    ],
  };
}

function gapped(points: readonly { at: number; value: number }[], stepS: number): StringHistory['imported'] {
  const out: StringHistory['imported'] = { at: [], values: [] };
  const gap = gapFrom(
    points.map((p) => p.at),
    stepS,
  );
  for (const p of points) {
    const before = out.at.at(-1);
    if (before !== undefined && p.at - before > gap) {
      out.at.push(before + stepS);
      out.values.push(null);
    }
    out.at.push(p.at);
    out.values.push(p.value);
  }
  return out;
}

function partOf(query: HistoryQuery): { from: Date; to: Date } | null {
  const { from, to } = query;
  if (from === undefined && to === undefined) return null;
  if (from === undefined || to === undefined || to <= from)
    throw new AppError('invalid', {
      message: historyWords.giveBothEnds,
      fields: [{ field: from === undefined ? 'query.from' : 'query.to', message: historyWords.giveBoth }],
    });
  return { from: new Date(from * 1000), to: new Date(to * 1000) };
}
