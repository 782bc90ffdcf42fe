import { connectorDesignSaid, type ConnectorPlace } from '../../../words/domain-photovoltaics-inputs';
import {
  connectorPairFinding,
  type ConnectorIdentity,
  type ConnectorPairFinding,
  type DocumentedPair,
} from '../../equipment/connectors';
import type { DesignFinding, DesignOutcome } from './design-finding';
import type { BuiltString } from './built-site';

const OUTCOME: Record<ConnectorPairFinding['outcome'], DesignOutcome> = {
  identical: 'within',
  documented: 'within',
  not_documented: 'exceeded',
  unknown: 'cannot_tell',
};
/** Worst first: what one place of a string says of all its pairs. */
const RANK = { not_documented: 0, unknown: 1, documented: 2, identical: 3 } as const;

/** The connectors that the catalogue puts together in a string: module on unit, and unit on its neighbour. */
export function connectorFindings(
  string: Pick<BuiltString, 'slots' | 'unit'>,
  connectors: ReadonlyMap<string, ConnectorIdentity>,
  pairs: readonly DocumentedPair[],
): DesignFinding[] {
  const of = (ref: string | null) => (ref === null ? null : (connectors.get(ref) ?? null));
  const { connectorIn, connectorOut } = string.unit;
  const modules = [...new Set(string.slots.map((s) => s.module.connector))].map(of);
  const worst = modules
    .map((module) => connectorPairFinding(module, of(connectorIn), pairs))
    .sort((a, b) => RANK[a.outcome] - RANK[b.outcome])[0];
  const out = of(connectorOut);
  return [
    ...(worst ? [findingAt('connector_module_unit', worst)] : []),
    findingAt('connector_unit_unit', connectorPairFinding(out, out, pairs)),
  ];
}

function findingAt(check: ConnectorPlace, found: ConnectorPairFinding): DesignFinding {
  const unknown = found.outcome === 'unknown';
  return {
    check,
    outcome: OUTCOME[found.outcome],
    value: null,
    limit: null,
    unit: '',
    safety: true,
    words: unknown
      ? connectorDesignSaid.unknown(check)
      : connectorDesignSaid.found(check, found.words, found.evidence),
    clause: found.clause,
    remedy: unknown ? connectorDesignSaid.enterConnectors : found.remedy,
    alternatives: found.outcome === 'not_documented' ? [connectorDesignSaid.lookAtRoof] : [],
  };
}
