import { countAtStart, counted, listed } from '../../drawings/numbers';
import type { Mark, Status, StringRow } from './rows';

/** The sentences of the checks page. */

export const MARK_WORDS: Record<Mark, string> = {
  pass: 'pass',
  fail: 'fail',
  contradicted: 'pass, and its figures contradict it',
  told: 'pass, with a remark',
  not_applicable: 'not applicable',
  missing: 'not recorded',
};
export const STATUS_WORDS: Record<Status, string> = {
  signed: 'signed off',
  ready: 'ready to sign',
  blocked: 'blocked',
  open: 'under way',
  none: 'not begun',
};

const names = (rows: readonly StringRow[]): string =>
  rows.length <= 4
    ? listed(rows.map((r) => r.string.name))
    : `${listed(rows.slice(0, 3).map((r) => r.string.name))} and ${rows.length - 3} more`;

export function checksHeading(rows: readonly StringRow[]): string {
  const signed = rows.filter((r) => r.status === 'signed').length;
  if (rows.length === 0) return 'No string has slots to check yet';
  if (rows.every((r) => r.state.recorded === 0)) return 'No install check is recorded yet';
  if (signed === rows.length)
    return rows.length === 1
      ? 'The only string is signed off'
      : `All ${counted(rows.length, 'string')} are signed off`;
  if (signed === 0) return `None of ${counted(rows.length, 'string')} is signed off`;
  return `${signed} of ${counted(rows.length, 'string')} ${signed === 1 ? 'is' : 'are'} signed off`;
}

/** What follows: fire risks first, then what is amiss, then what can be signed. */
export function checksSentence(rows: readonly StringRow[]): { strong: string; rest: string } {
  if (rows.length === 0) return { strong: '', rest: 'Draw or import the strings and their slots first.' };
  const risk = rows.filter((r) => r.amiss.some((b) => b.kind === 'fire_risk'));
  const amiss = rows.filter((r) => r.amiss.some((b) => b.kind !== 'fire_risk') && !risk.includes(r));
  const ready = rows.filter((r) => r.status === 'ready');
  const stale = ready.filter((r) => r.string.signOff?.stale);
  const rest: string[] = [];
  if (amiss.length > 0)
    rest.push(`${names(amiss)} ${amiss.length === 1 ? 'has' : 'have'} a check that did not pass.`);
  if (ready.length > 0)
    rest.push(
      `${countAtStart(ready.length)} ${ready.length === 1 ? 'is' : 'are'} ready to sign: ${names(ready)}${stale.length > 0 ? ` (${names(stale)} again: something was recorded since)` : ''}.`,
    );
  if (risk.length === 0 && amiss.length === 0 && ready.length === 0)
    rest.push(
      rows.every((r) => r.status === 'signed')
        ? 'Nothing is left to check.'
        : 'Record the checks on the roof, string by string; the phone’s page works without a network.',
    );
  return {
    strong:
      risk.length === 0
        ? ''
        : `${names(risk)} ${risk.length === 1 ? 'mates' : 'mate'} connectors that no document allows: a fire risk.`,
    rest: rest.join(' '),
  };
}
