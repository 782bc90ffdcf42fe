import { listed } from '../../drawings/numbers';
import type { Mark, Status, StringRow } from './rows';
import { checksWords } from '../../words/checks';

/** The sentences of the checks page. */

export const MARK_WORDS: Record<Mark, string> = {
  pass: checksWords.pass,
  fail: checksWords.fail,
  contradicted: checksWords.passAndItsFigures,
  told: checksWords.passWithARemark,
  not_applicable: checksWords.notApplicable,
  missing: checksWords.notRecorded,
};
export const STATUS_WORDS: Record<Status, string> = {
  signed: checksWords.signedOff,
  ready: checksWords.readyToSign,
  blocked: checksWords.blocked,
  open: checksWords.underWay,
  none: checksWords.notBegun,
};

const names = (rows: readonly StringRow[]): string =>
  rows.length <= 4
    ? listed(rows.map((r) => r.string.name))
    : checksWords.andMore(listed(rows.slice(0, 3).map((r) => r.string.name)), rows.length);

export function checksHeading(rows: readonly StringRow[]): string {
  const signed = rows.filter((r) => r.status === 'signed').length;
  if (rows.length === 0) return checksWords.noStringHasSlots;
  if (rows.every((r) => r.recorded === 0)) return checksWords.noInstallCheckIs;
  if (signed === rows.length)
    return rows.length === 1 ? checksWords.theOnlyStringIs : checksWords.allAreSignedOff(rows.length);
  if (signed === 0) return checksWords.noneOfIsSigned(rows.length);
  return checksWords.ofSignedOff(signed, rows.length);
}

/** What follows: fire risks first, then what is amiss, then what can be signed. */
export function checksSentence(rows: readonly StringRow[]): { strong: string; rest: string } {
  if (rows.length === 0) return { strong: '', rest: checksWords.drawOrImportThe };
  const risk = rows.filter((r) => r.amiss.includes('fire_risk'));
  const amiss = rows.filter((r) => r.amiss.some((kind) => kind !== 'fire_risk') && !risk.includes(r));
  const ready = rows.filter((r) => r.status === 'ready');
  const stale = ready.filter((r) => r.string.signOff?.stale);
  const rest: string[] = [];
  if (amiss.length > 0) rest.push(checksWords.checkThatDidNot(names(amiss), amiss.length));
  if (ready.length > 0)
    rest.push(checksWords.readyToSignWords(ready.length, names(ready), stale.length, names(stale)));
  if (risk.length === 0 && amiss.length === 0 && ready.length === 0)
    rest.push(
      rows.every((r) => r.status === 'signed') ? checksWords.nothingIsLeftTo : checksWords.recordTheChecksOn,
    );
  return {
    strong: risk.length === 0 ? '' : checksWords.connectorsThatNoDocument(names(risk), risk.length),
    rest: rest.join(' '),
  };
}
