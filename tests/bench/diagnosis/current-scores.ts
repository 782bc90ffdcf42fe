import { judgeMembership, type Membership } from '../../../src/domain/output/membership';
import { chooseMoments, momentLength, type Heard } from '../../../src/domain/output/membership-moments';
import { fitLoop, judgeLoop, type LoopSample } from '../../../src/domain/output/resistance';
import { STEP_S, STEPS_A_DAY as A_DAY, type OutputRun } from './output-scenarios';
import { sumAt, typicalAt, type Reports } from './output-series';
import { sunnyDays } from './output-scores';
import { unitTypeOf } from './plants';
import { Share, Tally } from './scoring';

/** Wrong strings and added resistance: what currents and voltages of a day or three tell. */

export interface CurrentScore {
  wrongString: Tally;
  /** Of the units that sit elsewhere, those of which the accuracy can't part the two strings. */
  undecided: Share;
  /** Of all units, those that are left open. */
  unitsUndecided: Share;
  /** From reports every five minutes, and from one in three of them. */
  resistance: Tally;
  resistanceCantTell: Share;
  resistanceQuarters: Tally;
  resistanceQuartersCantTell: Share;
  remarks: string[];
}

export const newCurrentScore = (): CurrentScore => ({
  wrongString: new Tally(),
  undecided: new Share(),
  unitsUndecided: new Share(),
  resistance: new Tally(),
  resistanceCantTell: new Share(),
  resistanceQuarters: new Tally(),
  resistanceQuartersCantTell: new Share(),
  remarks: [],
});

/** What is said of every unit after day `d`, from the moments that the service takes, too. */
export function membershipsOf(run: OutputRun, reports: Reports, d: number): Membership[] {
  const heard: Heard[] = [];
  for (let q = d * A_DAY; q < (d + 1) * A_DAY; q++) {
    const strings = reports.strings.filter((s) => s.current.some((c) => !Number.isNaN(c[q]!))).length;
    if (strings > 0) heard.push({ atS: q * STEP_S, strings });
  }
  const { atS } = chooseMoments(heard, momentLength(STEP_S));
  return judgeMembership(
    reports.strings.map((s) => ({
      name: s.name,
      currents: s.current.map((c) => Float64Array.from(atS, (t) => c[t / STEP_S]!)),
    })),
    { accuracy: unitTypeOf(run.drawn.plan).currentAccuracy },
  );
}

/** Days of a run on which membership is asked for: whatever the weather. */
const MEMBERSHIP_DAYS = [0, 1];

export function scoreMembership(run: OutputRun, reports: Reports, score: CurrentScore, n: number): void {
  const type = unitTypeOf(run.drawn.plan);
  if (type.kind === 'shutdown_only') return;
  for (const d of MEMBERSHIP_DAYS) {
    const memberships = membershipsOf(run, reports, d);
    const swapped = new Map(
      run.swaps.flatMap((s) => [
        [`${s.string}:${s.position - 1}`, s.otherString] as const,
        [`${s.otherString}:${s.otherPosition - 1}`, s.string] as const,
      ]),
    );
    for (const m of memberships) {
      score.wrongString.lookedAt++;
      score.unitsUndecided.count(m.outcome === 'cant_tell');
      const really = swapped.get(`${m.string}:${m.unit}`);
      const elsewhere = m.outcome === 'elsewhere';
      if (really === undefined) {
        if (!elsewhere) continue;
        score.wrongString.falseAlarms++;
        score.remarks.push(`run ${n} day ${d} ${m.string}:${m.unit + 1}: said to sit in ${m.otherString}`);
        continue;
      }
      if (elsewhere && m.otherString === really) {
        score.undecided.count(false);
        score.wrongString.hit(1);
      } else if (
        m.outcome === 'cant_tell' &&
        (m.undecidedWith.length === 0 || m.undecidedWith.includes(really))
      ) {
        score.undecided.count(true);
      } else {
        score.undecided.count(false);
        score.wrongString.missed++;
        score.remarks.push(
          `run ${n} day ${d} ${m.string}:${m.unit + 1} sits in ${really}: ${m.outcome} ${m.otherString ?? ''} (ln odds ${m.logOdds.toFixed(1)})`,
        );
      }
    }
  }
}

/** Samples of string `k` on days `from` to `to` (inclusive), every `every` steps. */
export function samplesOf(
  run: OutputRun,
  reports: Reports,
  k: number,
  from: number,
  to: number,
  every: number,
): LoopSample[] {
  const { plan, fromS } = run.drawn;
  const own = plan.strings[k]!;
  const r = reports.strings[k]!;
  const others = reports.strings.filter(
    (_, j) => j !== k && plan.strings[j]!.inverter === own.inverter && plan.strings[j]!.input === own.input,
  );
  const samples: LoopSample[] = [];
  for (let q = from * A_DAY; q < (to + 1) * A_DAY; q += every) {
    if (r.excluded[q] !== 0) continue;
    const sumV = sumAt(r.voltageOut, q);
    const ownA = typicalAt(r.current, q);
    const othersA = others.reduce((sum, o) => sum + typicalAt(o.current, q), 0);
    const inputV = r.inputV[q]!;
    if (Number.isNaN(sumV + ownA + othersA + inputV)) continue;
    samples.push({ atS: fromS + q * STEP_S, sumV, inputV, ownA, othersA, inputA: r.inputA[q]! });
  }
  return samples;
}

/** The fit at the end of the third sunny day with the fault, against the string's own past or its siblings. */
export function scoreResistance(run: OutputRun, reports: Reports, score: CurrentScore, n: number): void {
  if (unitTypeOf(run.drawn.plan).kind === 'shutdown_only') return;
  fitAndScore(run, reports, 1, score.resistance, score.resistanceCantTell, score.remarks, n);
  fitAndScore(run, reports, 3, score.resistanceQuarters, score.resistanceQuartersCantTell, score.remarks, n);
}

function fitAndScore(
  run: OutputRun,
  reports: Reports,
  every: number,
  tally: Tally,
  cantTell: Share,
  remarks: string[],
  n: number,
): void {
  const { plan } = run.drawn;
  const sunny = sunnyDays(run, reports);
  const last = sunny[2];
  if (last === undefined) return;
  const from = Math.max(run.onsetDay, sunny[0]!);
  const pasts = plan.strings.map((_, k) =>
    run.onsetDay < 2 ? 'no past' : fitLoop(samplesOf(run, reports, k, 0, run.onsetDay - 1, every)),
  );
  const fits = plan.strings.map((_, k) => fitLoop(samplesOf(run, reports, k, from, last, every)));
  const cableOhm = (k: number): number =>
    plan.strings[k]!.cableResistance + 0.002 * (plan.strings[k]!.slots.length + 1);
  plan.strings.forEach((s, k) => {
    const past = pasts[k]!;
    const finding = judgeLoop(fits[k]!, {
      past: typeof past === 'string' ? null : past,
      siblings: fits.flatMap((f, j) =>
        j === k || typeof f === 'string' ? [] : [{ ohm: f.ohm, cableOhm: cableOhm(j) }],
      ),
      siblingsGrowthOhm: fits.flatMap((f, j) => {
        const before = pasts[j]!;
        return j === k || typeof f === 'string' || typeof before === 'string' ? [] : [f.ohm - before.ohm];
      }),
      cableOhm: cableOhm(k),
    });
    const bad = run.ofString.get(s.name)?.kind === 'connector';
    const said = finding.outcome === 'excess' || finding.outcome === 'growing';
    tally.lookedAt += 3;
    cantTell.count(finding.outcome === 'cant_tell');
    if (bad && said) tally.hit(3);
    else if (bad) tally.missed++;
    else if (said) tally.falseAlarms++;
    if (bad !== said)
      remarks.push(
        `run ${n} ${s.name} ${plan.strings[0]!.unitType}, every ${5 * every} min: ${bad ? 'missed' : 'false'}: ${finding.outcome}, ${finding.above?.ohm.toFixed(3)} from ${finding.above?.low.toFixed(3)}, ${finding.words}${run.ofString.get(s.name) && !bad ? ` (${run.ofString.get(s.name)!.kind})` : ''}`,
      );
  });
}
