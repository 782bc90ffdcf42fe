import { stringFindingSaid } from '../../words/domain-string-finding';
import type { StringFinding } from '../verdicts/codes';
import type { FindingEvidence } from '../verdicts/memory';

/** A string's finding in one sentence. @param evidence null: it was not kept */
export function findingWords(kind: StringFinding, evidence: FindingEvidence | null): string {
  const voltage = evidence?.measuredV ?? null;
  const shared = evidence?.scope === 'input';
  switch (kind) {
    case 'not_shutting_down':
      return stringFindingSaid.standsWhileCommanded(voltage, shared);
    case 'stuck_positions_unknown':
      return stringFindingSaid.doNotPass(evidence?.unitsRange ?? null, evidence?.ofN ?? null, shared);
    case 'unexplained_voltage':
      return stringFindingSaid.notExplained(voltage, shared);
  }
}
