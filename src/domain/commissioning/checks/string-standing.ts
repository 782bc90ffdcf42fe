import { checkContext, standingOf, type CheckedSite, type CheckedString } from './context';
import type { CheckContext, CheckJudgement, CheckKey, StringCheck } from './definition';
import { judgeCheck } from './judge';
import { CHECKS, checksFor } from './list';
import { signOffState, type SignOffBlock, type SignOffState } from './sign-off';

/** How one check of a string stands. `contradicted`: a pass that its own figures do not bear out. */
export const CHECK_MARKS = ['pass', 'told', 'contradicted', 'fail', 'not_applicable', 'missing'] as const;
export type CheckMark = (typeof CHECK_MARKS)[number];
/** How far a string is on its way to a signature. */
export const STRING_STATUSES = ['signed', 'ready', 'blocked', 'open', 'none'] as const;
export type StringStatus = (typeof STRING_STATUSES)[number];

export interface CheckNow<R> {
  check: StringCheck;
  record: R | null;
  judged: CheckJudgement | null;
  mark: CheckMark;
}
export interface StringStanding<R> {
  context: CheckContext;
  state: SignOffState;
  cells: CheckNow<R>[];
  status: StringStatus;
  /** Blocks other than what is not recorded yet. */
  amiss: SignOffBlock[];
}

export type SignedString = CheckedString & { signOff: { stale: boolean } | null };

function markOf(record: { result: string } | null, judged: CheckJudgement | null): CheckMark {
  if (!record || !judged) return 'missing';
  if (record.result === 'fail') return 'fail';
  if (judged.weight === 'blocks') return 'contradicted';
  if (record.result === 'not_applicable') return 'not_applicable';
  return judged.weight === 'told' ? 'told' : 'pass';
}

/** Every check of a string of the site, and the string as a whole. @throws RangeError as `checkContext` */
export function stringStanding<S extends SignedString>(
  sheet: CheckedSite,
  string: S,
): StringStanding<S['checks'][number]> {
  const context = checkContext(sheet, string.id);
  const state = signOffState(string.checks.map(standingOf), context);
  const cells = checksFor(context).map((check) => {
    const record = string.checks.find((c) => c.check === check.key) ?? null;
    const judged = record && judgeCheck(standingOf(record), context);
    return { check, record, judged, mark: markOf(record, judged) };
  });
  const amiss = state.blocks.filter((b) => b.kind !== 'missing');
  const status =
    string.signOff && !string.signOff.stale
      ? 'signed'
      : state.maySign
        ? 'ready'
        : amiss.length > 0
          ? 'blocked'
          : state.recorded === 0
            ? 'none'
            : 'open';
  return { context, state, cells, status, amiss };
}

/** All strings of a site against all checks, as a matrix shows them. */
export interface CheckMatrix {
  checks: { key: CheckKey; name: string }[];
  standings: {
    stringId: string;
    status: StringStatus;
    recorded: number;
    asked: number;
    /** In the order of `checks`. */
    marks: CheckMark[];
    amiss: SignOffBlock['kind'][];
  }[];
}
/** @throws RangeError as `checkContext` */
export function checkMatrix(
  sheet: Omit<CheckedSite, 'strings'> & { strings: readonly SignedString[] },
): CheckMatrix {
  return {
    checks: CHECKS.map(({ key, name }) => ({ key, name })),
    standings: sheet.strings.map((string) => {
      const { status, state, cells, amiss } = stringStanding(sheet, string);
      return {
        stringId: string.id,
        status,
        recorded: state.recorded,
        asked: state.asked,
        marks: cells.map((cell) => cell.mark),
        amiss: amiss.map((block) => block.kind),
      };
    }),
  };
}
