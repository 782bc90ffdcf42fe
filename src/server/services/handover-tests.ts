import { number } from '../../drawings/numbers';
import type { Tx } from '../db/transaction';
import type { PackData, PackTest } from '../reports/handover/data';
import { shutdownTestReport } from './shutdown-test-report';
import { handoverTestWords } from '../../words/refusals-as-built';

/** The signed tests in force as the papers tell them, oldest first. */
export async function packTests(tx: Tx, data: PackData): Promise<PackTest[]> {
  const tests: PackTest[] = [];
  for (const { ref } of data.tests.filter((t) => !t.superseded)) {
    const { record, signature, fingerprint } = await shutdownTestReport(tx, ref);
    if (!record || !signature) continue; // on record by name only: made before tests were guided
    const { plan } = record.record;
    const instrument = plan?.instrument;
    tests.push({
      zone: record.facts.zone.name,
      initiator: [record.facts.initiator.name, record.facts.initiator.place].filter(Boolean).join(', '),
      at: signature.at,
      result: record.verdict.result,
      headline: record.verdict.headline,
      signedBy: `${signature.name}, ${signature.role}`,
      fingerprint: fingerprint ?? '',
      facts: [
        [
          handoverTestWords.operatedBy,
          plan ? `${plan.operator}, ${plan.onSite}${plan.others ? `, ${plan.others}` : ''}` : '',
        ],
        [
          handoverTestWords.lightAndWeather,
          plan ? [plan.light, plan.weather].filter(Boolean).join(', ') : '',
        ],
        [
          handoverTestWords.instrument,
          instrument
            ? handoverTestWords.instrumentIs(
                instrument.name,
                instrument.serial,
                instrument.category,
                number(instrument.ratedV),
                instrument.calibratedOn,
              )
            : handoverTestWords.nothingMeasured,
        ],
        [
          handoverTestWords.limitsHeld,
          handoverTestWords.limits(
            number(record.verdict.limits.outsideV),
            number(record.verdict.limits.insideV),
            number(record.verdict.limits.afterS),
            record.verdict.limits.source,
          ),
        ],
      ],
      strings: record.verdict.strings.map((s) => {
        const slowest = s.units
          .flatMap((u) => (u.followed ? [u.followed] : []))
          .sort((a, b) => b[1] - a[1])[0];
        return {
          name: s.name,
          result: s.result,
          words: s.live ? `${s.words} ${s.live}` : s.words,
          highestV: s.highestV,
          slowest: slowest ? handoverTestWords.slowest(number(slowest[0]), number(slowest[1])) : '',
        };
      }),
    });
  }
  return tests.sort((a, b) => a.at.localeCompare(b.at));
}
