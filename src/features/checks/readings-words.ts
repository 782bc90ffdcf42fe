import { listed } from '../../drawings/numbers';
import { STAGE_WORDS } from '../../words/domain-reading-stages';
import { stageUnderWay, type Outcome, type ReadingRow } from './readings-rows';
import { readingsWords } from '../../words/meter-readings';

/** The sentences of the readings page. */

/** As it goes on after a colon; names of strings keep their capital. */
const goingOn = (headline: string): string =>
  headline.replace(/^[A-Z](?=[a-z ])/, (letter) => letter.toLowerCase());

export const OUTCOME_WORDS: Record<Outcome, string> = {
  as_expected: readingsWords.asExpected,
  finding: readingsWords.notAsExpected,
  cant_tell: readingsWords.cantTell,
  proves_nothing: readingsWords.provesNothing,
  unread: readingsWords.notRead,
};

export function readingsHeading(rows: readonly ReadingRow[]): string {
  if (rows.length === 0) return readingsWords.noStringHasSlots;
  if (rows.every((r) => !r.between)) return readingsWords.noMeterReadingIs;
  const stage = stageUnderWay(rows);
  const here = rows.filter((r) => r.stage === stage);
  const expected = here.filter((r) => r.outcome === 'as_expected').length;
  return expected === here.length
    ? readingsWords.allReadAsExpected(here.length, STAGE_WORDS[stage])
    : readingsWords.ofAsExpected(expected, here.length, STAGE_WORDS[stage]);
}

export function readingsSentence(rows: readonly ReadingRow[]): { strong: string; rest: string } {
  const stage = stageUnderWay(rows);
  const here = rows.filter((r) => r.stage === stage);
  const of = (outcome: Outcome) => here.filter((r) => r.outcome === outcome).map((r) => r.string.name);
  const few = (names: readonly string[]): string =>
    names.length <= 4 ? listed(names) : readingsWords.andMore(listed(names.slice(0, 3)), names.length);
  const findings = here.filter((r) => r.outcome === 'finding');
  const rest: string[] = [];
  const unclear = [...of('cant_tell'), ...of('proves_nothing')];
  if (unclear.length > 0) rest.push(readingsWords.whatTheReadingMeans(few(unclear)));
  const unread = of('unread');
  if (unread.length > 0) rest.push(readingsWords.notRead2(few(unread), unread.length));
  if (rest.length === 0 && findings.length === 0 && here.length > 0)
    rest.push(readingsWords.aReadingAsExpected);
  const [first] = findings;
  return {
    strong: !first
      ? ''
      : findings.length === 1
        ? `${first.string.name}: ${goingOn(first.headline)}.`
        : readingsWords.doNotReadAs(few(findings.map((r) => r.string.name))),
    rest: rest.join(' '),
  };
}
