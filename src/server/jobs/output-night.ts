import { setImmediate as turn } from 'node:timers/promises';
import { DAILY_KINDS, type CauseKind } from '../../domain/causes/kinds';
import type { FoundCause, FoundUnit, UnitSays } from '../../domain/causes/changes';
import { judgeOutput, type OutputFinding } from '../../domain/output/low-output';
import { planeReference, type PlaneReference } from '../../domain/output/plane-reference';
import { median } from '../../domain/output/robust';
import { isWell, lastingWeakUnits, type WeakDay } from '../../domain/output/weak-days';
import { enoughToTell, weakUnits, type UnitVoltages } from '../../domain/output/weak-unit';
import { thresholdsOf, type Thresholds } from '../../domain/settings/thresholds';
import { asIngest, type Tx } from '../db/transaction';
import { addLosses, lockCauses, storedCauses, type CauseRow } from '../queries/causes-stored';
import { tellSiteChanged } from '../queries/live-notices';
import { writeLoopFits } from '../queries/loop-fits';
import {
  markNight,
  ownBaselines,
  writeOutputDays,
  type KeptOutputFinding,
  type OutputDayRow,
} from '../queries/output-days';
import type { OutputString } from '../queries/output-series';
import { seriesSite } from '../queries/output-site';
import { membershipAt } from '../services/membership';
import { applyCauses } from './judge-causes';
import { fitLoops, type LoopJudged } from './loop-night';
import { keptFinding, lowOutputCause, weakUnitCause, wrongStringCauses } from './night-findings';
import { readNightSeries, type NightPlane, type NightSeries } from './plane-series';

/** Local days that a night looks at: five with enough sun are needed, and ten to see dirt and rain. */
const DAYS = 14;
/** Days up to this one are a string's past when its model is told from its own figures. */
const FRESH_DAYS = 5;
/** A low output that so much of a stuck unit's share explains is that unit's. */
const EXPLAINED = 1.25;

export type NightDone = { strings: number; low: number; cantTell: number; told: number };
const NOTHING: NightDone = { strings: 0, low: 0, cantTell: 0, told: 0 };

interface LowJudged {
  plane: NightPlane;
  index: number;
  members: OutputString[];
  reference: PlaneReference;
  finding: OutputFinding;
  kept: KeptOutputFinding;
  /** Wh missing on day `d`, against what is usual. */
  missing: (d: number) => number | null;
}

/**
 * Judges the output of a site's strings at the end of a local day, when the day is rolled up: low output, weak units,
 * units in the wrong string, resistance. Reads and reckons first, then writes all of it in one transaction, once a day:
 * killed anywhere it begins again, run twice the second does nothing.
 */
export async function judgeNight(siteId: number, day: string, at: Date): Promise<NightDone> {
  const site = await asIngest((tx) => seriesSite(tx, siteId, day));
  if (!site || site.judged) return NOTHING;
  const series = await asIngest((tx) => readNightSeries(tx, site, day, DAYS));
  const d = series.days.length - 1;
  const baselines = await asIngest((tx) =>
    ownBaselines(tx, siteId, series.days[Math.max(0, d - FRESH_DAYS)] ?? day),
  );
  const usual = new Map(baselines.map((b) => [b.stringId, b.ratio]));
  const limits = thresholdsOf(site.thresholds);
  const low: LowJudged[] = [];
  for (const plane of series.planes) {
    low.push(...judgePlane(plane, series, usual, limits));
    await turn();
  }
  const loops = await fitLoops(site, series, low, limits.loopExcessOhm);
  const dayHours = ((series.boundsS[d + 1] ?? 0) - (series.boundsS[d] ?? 0)) / 3600;
  const dayEnd = new Date((series.boundsS[d + 1] ?? 0) * 1000);
  const membership = await asIngest((tx) => membershipAt(tx, siteId, dayHours, dayEnd));
  const weak: { n: NightSeries['strings'][number]; days: WeakDay[] }[] = [];
  for (const n of series.strings) {
    weak.push({ n, days: weakDays(n.string, series, n, limits) });
    await turn();
  }

  return asIngest(async (tx) => {
    const locked = await lockCauses(tx, siteId);
    if (!locked) return NOTHING;
    const rows = low.flatMap((l) => outputRows(l, series, d));
    const count = (outcome: OutputFinding['outcome']): number =>
      rows.filter((r) => r.outcome === outcome).length;
    const done = { strings: rows.length, low: count('low'), cantTell: count('cant_tell') };
    if (!(await markNight(tx, { siteId, day, at, ...done }))) return NOTHING;
    await writeOutputDays(tx, siteId, rows, at);
    await writeLoopFits(
      tx,
      siteId,
      loops.flatMap((l) => (l.row ? [l.row] : [])),
    );

    const open = (await storedCauses(tx, siteId, ['stuck', 'low_output'], at)).filter(
      (c) => c.closedS === null,
    );
    const weakNow = weak.flatMap(({ n, days }) =>
      lastingWeakUnits(days).map((w) =>
        weakUnitCause(locked.ref, n.string, w, series.boundsS[d] ?? 0, unitDayWh(low, n.string, d)),
      ),
    );
    const lowNow = low
      .filter((l) => l.finding.outcome === 'low' && !isExplained(l, open, weakNow))
      .map((l) => lowOutputCause(locked.ref, l.members, l.finding, l.kept, firstLowS(l, series)));
    const found: FoundCause[] = [
      ...lowNow,
      ...weakNow,
      ...loops.flatMap((l) => (l.cause ? [l.cause(locked.ref)] : [])),
      ...wrongStringCauses(locked.ref, membership.suspects, series.boundsS[d] ?? 0),
    ];
    const told = await applyCauses(tx, locked, {
      at,
      kinds: DAILY_KINDS,
      found,
      says: daySays({ low, weak, loops, units: membership.units, series }),
    });
    await addDayLosses(tx, siteId, low, series, at);
    if (told > 0) await tellSiteChanged(tx, siteId);
    return { ...done, told };
  });
}

function judgePlane(
  plane: NightPlane,
  series: NightSeries,
  usual: ReadonlyMap<number, number>,
  limits: Thresholds,
): LowJudged[] {
  plane.series.strings.forEach((s, k) => {
    s.ownBaseline = usual.get(plane.members[k]?.[0]?.id ?? 0) ?? null;
  });
  const reference = planeReference(plane.series);
  return plane.series.strings.map((s, index): LowJudged => {
    const finding = judgeOutput(plane.series, reference, index, {
      lossMin: limits.lowOutputLoss,
      daysLow: limits.lowOutputDays,
    });
    const made = finding.days.filter((x) => x.low).map((x) => x.ratio);
    const expects = finding.loss === null ? 1 : finding.loss.share + (made.length > 0 ? median(made) : 1);
    return {
      plane,
      index,
      members: plane.members[index] ?? [],
      reference,
      finding,
      kept: keptFinding(finding, series.days, s.scope),
      missing: (d) => {
        const expected = reference.expectedWh[index]?.[d] ?? 0;
        const wh = expected * expects - (reference.madeWh[index]?.[d] ?? 0);
        return expected > 0 ? Math.max(0, wh) : null;
      },
    };
  });
}

/** One row for each string; strings that share an input share its figures by their size. */
function outputRows(l: LowJudged, series: NightSeries, d: number): OutputDayRow[] {
  const total = l.members.reduce((sum, m) => sum + m.powerRef, 0);
  const known = (x: number | undefined): number | null => (x === undefined || Number.isNaN(x) ? null : x);
  const loss = l.finding.outcome === 'low' ? l.missing(d) : null;
  const expected = l.reference.expectedWh[l.index]?.[d] ?? 0;
  return l.members.map((m) => ({
    stringId: m.id,
    day: series.days[d] ?? '',
    outcome: l.finding.outcome,
    method: l.finding.method,
    ratio: known(l.reference.ratio[l.index]?.[d]),
    z: known(l.reference.z[l.index]?.[d]),
    lossWh: loss === null ? null : (loss * m.powerRef) / total,
    expectedWh: expected > 0 ? (expected * m.powerRef) / total : null,
    signature: l.finding.signature?.kind ?? null,
    finding: l.kept,
  }));
}

const firstLowS = (l: LowJudged, series: NightSeries): number =>
  series.boundsS[l.finding.days.find((x) => x.low)?.day ?? series.days.length - 1] ?? 0;

/** Units that are stuck, or cells that are bypassed, have their cause already: their string needs no second one. */
function isExplained(l: LowJudged, open: readonly CauseRow[], weak: readonly FoundCause[]): boolean {
  const refs = new Set(l.members.map((m) => m.ref));
  const here = (c: { units: FoundUnit[] }): FoundUnit[] => c.units.filter((u) => refs.has(u.stringId));
  if (open.some((c) => c.kind === 'low_output' && here(c).length > 0)) return false;
  const units = l.members.reduce((sum, m) => sum + m.slots, 0);
  const stuck = open.filter((c) => c.kind === 'stuck').flatMap(here).length;
  const share = l.finding.loss?.share ?? 1;
  if (stuck > 0 && share <= (EXPLAINED * stuck) / units) return true;
  const kind = l.finding.signature?.kind;
  return kind === 'bypassed_substring' && weak.some((c) => here(c).length > 0);
}

/** What each of the last days says of a string's units. */
function weakDays(
  s: OutputString,
  series: NightSeries,
  n: NightSeries['strings'][number],
  limits: Thresholds,
): WeakDay[] {
  const columns = n.voltageIn ?? (s.kind === 'optimizing' || s.measures === 'input' ? null : n.voltage);
  const columnsIn = s.measures === 'input' ? n.voltage : columns;
  if (columnsIn === null) return [];
  return [4, 3, 2, 1].map((back): WeakDay => {
    const k = series.days.length - back;
    const fromS = series.boundsS[k];
    const toS = series.boundsS[k + 1];
    if (fromS === undefined || toS === undefined) return null;
    const q = (atS: number): number => Math.round((atS - (series.boundsS[0] ?? 0)) / 900);
    const part = (column: Float64Array): Float64Array => column.slice(q(fromS), q(toS));
    const sound = part(n.typicalA);
    part(Float64Array.from(n.excluded)).forEach((e, i) => {
      if (e !== 0) sound[i] = NaN;
    });
    // what was reported before a unit came to its slot is another's
    const voltage = columnsIn.map((c, u) =>
      (s.placedS[u] ?? Infinity) > fromS ? part(c).fill(NaN) : part(c),
    );
    sound.forEach((_, i) => {
      if (voltage.every((v) => Number.isNaN(v[i]!))) sound[i] = NaN;
    });
    const input: UnitVoltages = { voltage, current: sound, bypassGroups: s.bypassGroups };
    return enoughToTell(input) ? weakUnits(input, limits.weakUnitLoss) : null;
  });
}

/** What one unit of a string makes on a day, Wh. */
function unitDayWh(low: readonly LowJudged[], s: OutputString, d: number): number | null {
  const of = low.find((l) => l.members.some((m) => m.id === s.id));
  const made = of?.reference.madeWh[of.index]?.[d] ?? 0;
  return made > 0 ? made / s.slots : null;
}

function daySays(night: {
  low: readonly LowJudged[];
  weak: readonly { n: NightSeries['strings'][number]; days: WeakDay[] }[];
  loops: readonly LoopJudged[];
  units: readonly { stringId: string; position: number; serial: string; outcome: string }[];
  series: NightSeries;
}): (kind: CauseKind, unit: FoundUnit) => UnitSays {
  const strings = new Set(night.low.flatMap((l) => l.members.map((m) => m.ref)));
  for (const n of night.series.strings) strings.add(n.string.ref);
  return (kind, unit) => {
    if (!strings.has(unit.stringId)) return 'gone';
    if (kind === 'low_output') {
      const l = night.low.find((x) => x.members.some((m) => m.ref === unit.stringId));
      return l?.finding.outcome === 'as_expected'
        ? 'well'
        : l?.finding.outcome === 'low'
          ? 'shows'
          : 'unknown';
    }
    if (kind === 'loop_resistance') {
      const loop = night.loops.find((l) => l.stringRef === unit.stringId);
      return loop?.outcome === 'usual' ? 'well' : 'unknown';
    }
    const of = night.weak.find((w) => w.n.string.ref === unit.stringId);
    const slot = (unit.position ?? 1) - 1;
    if (of && of.n.string.serials[slot] !== unit.serial) return 'gone';
    if (kind === 'weak_unit') return of && isWell(of.days, slot) === true ? 'well' : 'unknown';
    const member = night.units.find((u) => u.stringId === unit.stringId && u.position === unit.position);
    return member?.outcome === 'here' ? 'well' : member?.outcome === 'elsewhere' ? 'shows' : 'unknown';
  };
}

/** Adds up what low strings cost, day by day: each day of a cause is counted once. */
async function addDayLosses(
  tx: Tx,
  siteId: number,
  low: readonly LowJudged[],
  series: NightSeries,
  at: Date,
): Promise<void> {
  const endS = series.boundsS.at(-1) ?? 0;
  const open = (await storedCauses(tx, siteId, ['low_output'], at)).filter((c) => c.closedS === null);
  const losses = open.flatMap((c) => {
    const refs = new Set(c.units.map((u) => u.stringId));
    const of = low.find((l) => l.members.some((m) => refs.has(m.ref)));
    if (!of) return [];
    const wh = series.days.reduce((sum, _, d) => {
      const ends = series.boundsS[d + 1] ?? 0;
      return ends > (c.lossUntilS ?? 0) && ends > c.sinceS ? sum + (of.missing(d) ?? 0) : sum;
    }, 0);
    return [{ id: c.id, wh }];
  });
  await addLosses(tx, losses, new Date(endS * 1000));
}
