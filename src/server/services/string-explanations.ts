import { explanationsOf } from '../../domain/output/explanations';
import { enoughToTell, weakUnits, type UnitVoltages, type WeakUnit } from '../../domain/output/weak-unit';
import { UNIT_STATES, VERDICTS } from '../../domain/verdicts/codes';
import { localDay } from '../../drawings/times';
import type { StringExplanations } from '../../schemas/api/workbench';
import type { Tx } from '../db/transaction';
import { outputDaysOf } from '../queries/output-days';
import { stringFacts, type StringFacts } from '../queries/string-facts';
import { dayBounds } from '../queries/string-history';
import { conductAt, unitQuarters } from '../queries/string-units';
import { noSuchString } from './string-axis';
import { loopOf } from './string-loop';
import { explanationWords } from '../../words/refusals-history';

/** So many days back the newest judged one is looked for. */
const JUDGED_WITHIN = 14;

/** Voltages of single units over a day's quarters; null: their output is not their module's voltage, or nothing tells. */
async function weakOn(tx: Tx, facts: StringFacts, day: { from: Date; to: Date }): Promise<WeakUnit[] | null> {
  if (facts.kind !== 'monitored') return null;
  const voltages = await unitQuarters(tx, facts.id, day, 'voltage');
  const currents = await unitQuarters(tx, facts.id, day, 'current');
  const column = (p: number): Float64Array => Float64Array.from(voltages.map((q) => q.values?.[p] ?? NaN));
  const middle = currents.map((q) => {
    const known = (q.values ?? []).filter((v) => v !== null).sort((a, b) => a - b);
    return known[Math.floor(known.length / 2)] ?? 0;
  });
  const input: UnitVoltages = {
    voltage: Array.from({ length: facts.slots }, (_, p) => column(p)),
    current: Float64Array.from(middle),
    bypassGroups: facts.module.bypassGroups,
  };
  return enoughToTell(input) ? weakUnits(input) : null;
}

/**
 * Which explanation fits, on a day (today: with what the newest judged night found).
 * @throws AppError not_found
 */
export async function readExplanations(
  tx: Tx,
  ref: string,
  query: { on?: string | undefined },
  now: Date,
): Promise<StringExplanations> {
  const facts = await stringFacts(tx, ref);
  if (!facts) throw noSuchString();
  const day = await dayBounds(tx, query.on ?? null, now, facts.timeZone, 1);
  const span = await dayBounds(tx, query.on ?? null, now, facts.timeZone, JUDGED_WITHIN);
  const judged = await outputDaysOf(tx, facts.id, {
    from: localDay(span.from, facts.timeZone),
    to: localDay(day.from, facts.timeZone),
  });
  const newest = judged.at(-1) ?? null;
  const weak = await weakOn(tx, facts, day);
  const { finding: loop } = await loopOf(tx, facts, query.on, now);
  const end = new Date(Math.min(now.getTime(), day.to.getTime()));
  const held = (await conductAt(tx, facts.id, end))
    .filter((c) => UNIT_STATES[c.state] === 'shutdown' && VERDICTS[c.verdict] === 'stuck')
    .map((c) => c.position);
  const finding = newest?.finding ?? null;
  return {
    day: newest?.day ?? null,
    outcome: newest?.outcome ?? null,
    words: finding?.words ?? explanationWords.notJudgedYet,
    method: finding?.method ?? null,
    lossKWh: finding?.lossKWh ?? null,
    threshold: finding ? { ratio: finding.threshold.ratio, source: finding.threshold.source } : null,
    days: finding?.days ?? [],
    explanations: explanationsOf({
      signature: finding?.signature ?? null,
      outcome: newest?.outcome ?? null,
      units: facts.units,
      bypassGroups: facts.module.bypassGroups,
      loop,
      weak,
      held,
    }),
    weak: (weak ?? []).map((w) => ({
      position: w.unit + 1,
      ratio: w.ratio,
      share: w.share,
      words: w.words,
    })),
  };
}
