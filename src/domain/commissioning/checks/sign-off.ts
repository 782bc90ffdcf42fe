import { checkFiguresSaid, signOffSaid } from '../../../words/domain-check-figures';
import { checksFor } from './list';
import { judgeCheck } from './judge';
import { CHECK_KEYS, type CheckContext, type CheckKey, type CheckStanding } from './definition';

export const BLOCK_KINDS = ['missing', 'failed', 'contradicted', 'fire_risk'] as const;

export interface SignOffBlock {
  check: CheckKey;
  kind: (typeof BLOCK_KINDS)[number];
  words: string;
  remedy: string;
}

export interface SignOffState {
  maySign: boolean;
  blocks: SignOffBlock[];
  /** What a signature does not cover, or what is worth knowing first. */
  remarks: string[];
  /** Checks recorded, of all that are asked. */
  recorded: number;
  asked: number;
}

/**
 * Whether the install checks of a string can be signed, and what blocks it: every check that must come first is
 * recorded, none failed, none contradicted by its own figures. `records`: the newest of each check.
 */
export function signOffState(records: readonly CheckStanding[], context: CheckContext): SignOffState {
  const asked = checksFor(context);
  const blocks: SignOffBlock[] = [];
  const remarks: string[] = [];
  for (const check of asked) {
    const record = records.find((r) => r.check === check.key);
    if (!record) {
      if (check.mayFollow) remarks.push(signOffSaid.mayFollow(check.name));
      else
        blocks.push({
          check: check.key,
          kind: 'missing',
          words: signOffSaid.missing(check.name),
          remedy: check.offersNotApplicable
            ? signOffSaid.recordNotApplicable(check.offersNotApplicable)
            : check.how,
        });
      continue;
    }
    const judged = judgeCheck(record, context);
    if (judged.weight === 'blocks')
      blocks.push({
        check: check.key,
        kind: record.result === 'fail' ? 'failed' : judged.fireRisk ? 'fire_risk' : 'contradicted',
        words:
          judged.words.length > 0
            ? signOffSaid.judged(check.name, judged.words)
            : signOffSaid.failed(check.name, record.reason),
        remedy: judged.remedy ?? checkFiguresSaid.putRight,
      });
    else remarks.push(...judged.words.map((w) => signOffSaid.judged(check.name, [w])));
  }
  return {
    maySign: blocks.length === 0,
    blocks,
    remarks,
    recorded: asked.filter((c) => records.some((r) => r.check === c.key)).length,
    asked: asked.length,
  };
}

/** What a signature is made over: the records themselves, in the order of the list. */
export function signedRecords<T extends { ref: string; check: CheckKey }>(records: readonly T[]): T[] {
  const order = (key: CheckKey): number => CHECK_KEYS.indexOf(key);
  return [...records].sort((a, b) => order(a.check) - order(b.check) || (a.ref < b.ref ? -1 : 1));
}
