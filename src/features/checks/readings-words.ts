import { counted, listed } from '../../drawings/numbers';
import { STAGE_WORDS } from '../../domain/commissioning/readings/stages';
import { stageUnderWay, type Outcome, type ReadingRow } from './readings-rows';

/** The sentences of the readings page. */

/** As it goes on after a colon; names of strings keep their capital. */
const goingOn = (headline: string): string =>
  headline.replace(/^[A-Z](?=[a-z ])/, (letter) => letter.toLowerCase());

export const OUTCOME_WORDS: Record<Outcome, string> = {
  as_expected: 'as expected',
  finding: 'not as expected',
  cant_tell: 'can’t tell',
  proves_nothing: 'proves nothing',
  unread: 'not read',
};

export function readingsHeading(rows: readonly ReadingRow[]): string {
  if (rows.length === 0) return 'No string has slots to read yet';
  if (rows.every((r) => !r.between)) return 'No meter reading is recorded yet';
  const stage = stageUnderWay(rows);
  const here = rows.filter((r) => r.stage === stage);
  const expected = here.filter((r) => r.outcome === 'as_expected').length;
  return expected === here.length
    ? `All ${counted(here.length, 'string')} read as expected ${STAGE_WORDS[stage]}`
    : `${expected} of ${counted(here.length, 'string')} ${expected === 1 ? 'reads' : 'read'} as expected ${STAGE_WORDS[stage]}`;
}

export function readingsSentence(rows: readonly ReadingRow[]): { strong: string; rest: string } {
  const stage = stageUnderWay(rows);
  const here = rows.filter((r) => r.stage === stage);
  const of = (outcome: Outcome) => here.filter((r) => r.outcome === outcome).map((r) => r.string.name);
  const few = (names: readonly string[]): string =>
    names.length <= 4 ? listed(names) : `${listed(names.slice(0, 3))} and ${names.length - 3} more`;
  const findings = here.filter((r) => r.outcome === 'finding');
  const rest: string[] = [];
  const unclear = [...of('cant_tell'), ...of('proves_nothing')];
  if (unclear.length > 0)
    rest.push(
      `${few(unclear)}: what the reading means can’t be told; measure again beside a sibling in good light.`,
    );
  const unread = of('unread');
  if (unread.length > 0) rest.push(`${few(unread)} ${unread.length === 1 ? 'is' : 'are'} not read.`);
  if (rest.length === 0 && findings.length === 0 && here.length > 0)
    rest.push('A reading as expected is no proof that a conductor is dead.');
  const [first] = findings;
  return {
    strong: !first
      ? ''
      : findings.length === 1
        ? `${first.string.name}: ${goingOn(first.headline)}.`
        : `${few(findings.map((r) => r.string.name))} do not read as they should.`,
    rest: rest.join(' '),
  };
}
