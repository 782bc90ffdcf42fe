import type { RoundEvidence, TestFacts, TestRound } from '../../domain/commissioning/shutdown-test-record';
import type { TestVerdict } from '../../domain/commissioning/shutdown-test-verdict';
import { TestLines } from '../../drawings/TestLines';
import { linesOf, readingPoints, releasedAfterS, roundName, type StringNow } from './round';
import { roundDrawing } from '../../words/shutdown-test';

interface Props {
  facts: TestFacts;
  strings: readonly StringNow[];
  round: TestRound;
  seen: RoundEvidence | undefined;
  limits: TestVerdict['limits'];
}

/** A round drawn: a line a string, rings for the instrument; the same as a table one key away. */
export function RoundDrawing({ facts, strings, round, seen, limits }: Props) {
  const releaseS = releasedAfterS(round, seen);
  const lines = linesOf(strings, limits.afterS, releaseS);
  const readings = readingPoints(strings);
  if (lines.every((l) => l.points.length === 0) && readings.length === 0)
    return <p className="text-ink-2">{roundDrawing.linesBeginWithThe}</p>;
  const label = roundDrawing.voltagesOfStringsFrom(
    roundName(facts, round.transmitter),
    strings.length,
    limits.outsideV,
    limits.insideV,
    limits.afterS,
  );
  const drawn = { lines, readings, limits, releaseS, label };
  return (
    <>
      <div className="hidden sm:block print:block">
        <TestLines {...drawn} width={880} height={300} />
      </div>
      <div className="sm:hidden print:hidden">
        <TestLines {...drawn} width={360} height={260} />
      </div>
      <p className="mt-1 text-sm text-ink-2">{roundDrawing.linesAreReportsAnd}</p>
      <details className="no-print mt-1">
        <summary className="inline-flex min-h-[44px] cursor-pointer items-center text-sm underline underline-offset-2">
          {roundDrawing.theSameAsA}
        </summary>
        <table className="w-full text-left text-sm">
          <thead>
            <tr className="border-b border-rule text-ink-2">
              <th scope="col" className="py-1 pr-3 font-medium">
                {roundDrawing.string}
              </th>
              <th scope="col" className="py-1 pr-3 font-medium">
                {roundDrawing.newest}
              </th>
              <th scope="col" className="py-1 pr-3 font-medium">
                {roundDrawing.atOrUnderIts}
              </th>
              <th scope="col" className="py-1 font-medium">
                {roundDrawing.from}
              </th>
            </tr>
          </thead>
          <tbody>
            {strings.map((s) => (
              <tr key={s.part.id} className="border-b border-rule-faint">
                <td className="py-1 pr-3 font-semibold">{s.part.name}</td>
                <td className="py-1 pr-3">
                  {s.newest
                    ? roundDrawing.afterSeconds(s.newest.volts, Math.round(s.newest.afterS))
                    : roundDrawing.notKnown}
                </td>
                <td className="py-1 pr-3">
                  {s.underFromS === null
                    ? roundDrawing.notUnder(s.limitV)
                    : roundDrawing.limitVvAfterUnderFromS(s.limitV, Math.ceil(s.underFromS))}
                </td>
                <td className="py-1 text-ink-2">{s.source}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </details>
    </>
  );
}
