import { judgeOutput } from '../../../src/domain/output/low-output';
import {
  planeReference,
  type PlaneReference,
  type PlaneSeries,
} from '../../../src/domain/output/plane-reference';
import { median } from '../../../src/domain/output/robust';
import type { SignatureKind } from '../../../src/domain/output/signature';
import { weakUnits, type UnitVoltages } from '../../../src/domain/output/weak-unit';
import type { OutputFault, OutputRun } from './output-scenarios';
import { planeOf, planeUntil, quarters, typicalAt, type Reports } from './output-series';
import { moduleTypeOf, unitTypeOf } from './plants';
import { Share, Tally } from './scoring';

/** Low output and bypassed cells, held against the twin. */

export interface OutputScore {
  lowOutput: Tally;
  /** Strings with too few siblings to compare: judged by the model. */
  lowOutputByModel: Tally;
  /** Of both, losses just above the one that is to be found. */
  limitCases: Share;
  signature: Share;
  cantTell: Share;
  bypassed: Tally;
  toldApart: Share;
  remarks: string[];
}

export const newOutputScore = (): OutputScore => ({
  lowOutput: new Tally(),
  lowOutputByModel: new Tally(),
  limitCases: new Share(),
  signature: new Share(),
  cantTell: new Share(),
  bypassed: new Tally(),
  toldApart: new Share(),
  remarks: [],
});

/** A loss of this share is to be found; below the second a finding is a false alarm; between them either may be said. */
export const LOSS_TO_FIND = 0.08;
const LOSS_OF_NONE = 0.03;
const LIMIT_CASE_BELOW = 0.1;
/** kWh/m² in the plane that make a sunny day. */
export const SUNNY = 2.5;
const SUNNY_DAYS = 3;

/** Days on which the faults are there, the sunny ones among them. */
export const sunnyDays = (run: OutputRun, reports: Reports): number[] =>
  Array.from({ length: run.days }, (_, d) => d).filter(
    (d) => d >= run.onsetDay && reports.insolation[d]! >= SUNNY,
  );

const LOOKS_LIKE: Partial<Record<OutputFault['kind'], SignatureKind[]>> = {
  soiling: ['current_low', 'soiling'],
  shade: ['shade'],
  stuck: ['units_missing'],
  bypass_diode: ['bypassed_substring'],
};

export function scoreLowOutput(run: OutputRun, reports: Reports, score: OutputScore, n: number): void {
  const plane = planeOf(run, reports);
  const sunny = sunnyDays(run, reports);
  const references = new Map<number, PlaneReference>();
  const planes = new Map<number, PlaneSeries>();
  for (let d = 2; d < run.days; d++) {
    const until = planeUntil(plane, d, run.cutOff);
    references.set(d, planeReference(until));
    planes.set(d, until);
  }
  const baseline = baselines(run, plane);
  run.drawn.plan.strings.forEach((s, k) => {
    const r = reports.strings[k]!;
    const lossOn = (days: readonly number[]): number =>
      1 - days.reduce((sum, d) => sum + r.gaveWh[d]!, 0) / days.reduce((sum, d) => sum + r.twinWh[d]!, 0);
    // what lasts: snow that a string keeps for an afternoon is nobody's case
    const loss = sunny.length < SUNNY_DAYS ? NaN : median(sunny.map((d) => lossOn([d])));
    const tally =
      references.get(run.days - 1)!.method === 'siblings' ? score.lowOutput : score.lowOutputByModel;
    let found = NaN;
    let saidFalse = false;
    let saidBefore = false;
    for (let d = 2; d < run.days; d++) {
      const until = planes.get(d)!;
      until.strings[k]!.ownBaseline = d >= run.onsetDay ? baseline[k]! : null;
      const finding = judgeOutput(until, references.get(d)!, k);
      score.cantTell.count(finding.outcome === 'cant_tell');
      if (finding.outcome !== 'cant_tell') tally.lookedAt++;
      const low = finding.outcome === 'low';
      const truly = median(
        finding.days.map(({ day }) => (r.twinWh[day]! > 0 ? 1 - r.gaveWh[day]! / r.twinWh[day]! : 0)),
      );
      if (low && !saidBefore && truly < LOSS_OF_NONE) {
        tally.falseAlarms++;
        saidFalse = true;
        score.remarks.push(
          `run ${n} ${s.name}: false low on day ${d} by ${finding.method}: ${finding.words}`,
        );
      }
      if (low && Number.isNaN(found) && d >= run.onsetDay) {
        found = sunny.filter((x) => x <= d).length;
        const kinds = LOOKS_LIKE[run.ofString.get(s.name)?.kind ?? 'connector'];
        if (kinds && !saidFalse) {
          const right = kinds.includes(finding.signature!.kind);
          score.signature.count(right);
          if (!right)
            score.remarks.push(
              `run ${n} ${s.name}: ${run.ofString.get(s.name)!.kind} looked like ${finding.signature!.kind}: ${finding.words}`,
            );
        }
      }
      saidBefore = low;
    }
    if (!(loss >= LOSS_TO_FIND)) return;
    if (loss < LIMIT_CASE_BELOW) score.limitCases.count(found <= SUNNY_DAYS);
    if (found <= SUNNY_DAYS) tally.hit(found);
    else {
      tally.missed++;
      score.remarks.push(
        `run ${n} ${s.name} (${references.get(run.days - 1)!.method}): loss of ${(100 * loss).toFixed(1)} % by ${run.ofString.get(s.name)?.kind ?? 'a neighbour'} ${Number.isNaN(found) ? 'not found' : `found after ${found} sunny days`}`,
      );
    }
  });
}

/** What each string made of the model's output while all was well: its own past. */
function baselines(run: OutputRun, plane: PlaneSeries): (number | null)[] {
  if (run.onsetDay < 2) return plane.strings.map(() => null);
  const past = planeReference(planeUntil(plane, run.onsetDay - 1, run.cutOff));
  return past.ratio.map((r) => {
    const known = [...r].filter((x) => !Number.isNaN(x));
    return known.length < 2 ? null : median(known);
  });
}

/** A string's units in quarters, as the judgement of weak units takes them; of a day by its number. */
export function unitDays(run: OutputRun, reports: Reports, k: number): (d: number) => UnitVoltages {
  const { bypassGroups } = moduleTypeOf(run.drawn.plan);
  const r = reports.strings[k]!;
  // an optimizing unit moves its output, so its input side tells
  const columns = (unitTypeOf(run.drawn.plan).kind === 'optimizing' ? r.voltageIn : r.voltageOut).map(
    quarters,
  );
  const typical = new Float64Array(reports.steps).fill(NaN);
  for (let q = 0; q < reports.steps; q++) typical[q] = typicalAt(r.current, q);
  const current = quarters(typical);
  return (d) => {
    const part = (c: Float64Array): Float64Array => c.subarray(d * 96, (d + 1) * 96);
    return { voltage: columns.map(part), current: part(current), bypassGroups };
  };
}

/** Bypassed cells by unit, day by day, and told from a unit that is held in shutdown. */
export function scoreWeakUnits(run: OutputRun, reports: Reports, score: OutputScore, n: number): void {
  const type = unitTypeOf(run.drawn.plan);
  if (type.kind === 'shutdown_only') return;
  const daysLit = Array.from({ length: run.days }, (_, d) => d).filter((d) => reports.insolation[d]! >= 1);
  run.drawn.plan.strings.forEach((s, k) => {
    const day = unitDays(run, reports, k);
    const faults = run.faults.flatMap((f) =>
      (f.fault.kind === 'bypass_diode' || f.fault.kind === 'stuck') && f.fault.string === s.name
        ? [f.fault]
        : [],
    );
    const told = new Map<number, number>();
    const alarms = new Set<number>();
    let tried = 0;
    for (const d of daysLit) {
      const weak = weakUnits(day(d));
      score.bypassed.lookedAt += s.slots.length;
      const there = d >= run.onsetDay;
      if (there) tried++;
      for (const w of weak.filter((x) => x.kind === 'bypassed_substring')) {
        const truly = faults.find((f) => f.position === w.unit + 1);
        if (there && truly?.kind === 'bypass_diode') {
          if (w.count === 1 && !told.has(w.unit)) told.set(w.unit, tried);
        } else alarms.add(w.unit);
      }
    }
    for (const unit of alarms)
      score.remarks.push(`run ${n} ${s.name}:${unit + 1}: bypassed cells said falsely`);
    score.bypassed.falseAlarms += alarms.size;
    if (tried === 0) return;
    for (const f of faults) {
      const unit = f.position - 1;
      if (f.kind === 'stuck') score.toldApart.count(!alarms.has(unit));
      else {
        score.toldApart.count(told.has(unit));
        if (told.has(unit)) score.bypassed.hit(told.get(unit)!);
        else {
          score.bypassed.missed++;
          score.remarks.push(`run ${n} ${s.name}:${f.position} (${type.name}): bypassed cells not found`);
        }
      }
    }
  });
}
