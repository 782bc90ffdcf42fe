import { connectorPairSaid as said } from '../../words/domain-equipment-connectors';

/** A connector type of the catalogue, as far as mating is concerned. */
export interface ConnectorIdentity {
  /** Public identifier of the catalogue entry. */
  id: string;
  name: string;
  maker: string;
  /** The maker's type designation. */
  family: string;
}

/** Two different types that a document says may be mated, as a manager recorded it. Order has no meaning. */
export interface DocumentedPair {
  first: string;
  second: string;
  /** Document, edition, page. */
  evidence: string;
}

export type ConnectorPairOutcome = 'identical' | 'documented' | 'not_documented' | 'unknown';

export interface ConnectorPairFinding {
  outcome: ConnectorPairOutcome;
  /** Whether the pair stands in the way of a sign-off: not identical and not documented, or not known. */
  fireRisk: boolean;
  /** What was found, one sentence. */
  words: string;
  /** What it is held against, and how well that is known. */
  clause: string;
  /** What to do; null where nothing has to be done. */
  remedy: string | null;
  /** What a documented pair rests on. */
  evidence: string | null;
}

/**
 * Clauses as quoted by others (high confidence), the scopes of the two IEC documents from their official previews: IEC
 * 62852 covers the connectors themselves, IEC TR 63225 describes the incompatibility of makes that click together.
 */
export const CONNECTOR_CLAUSE = said.clause;

const same = (a: string, b: string): boolean =>
  a.trim().toLocaleLowerCase('en') === b.trim().toLocaleLowerCase('en');

/** Whether two catalogue entries are one maker's one type: entries may differ in cable or rating only. */
export const isIdenticalConnector = (a: ConnectorIdentity, b: ConnectorIdentity): boolean =>
  a.id === b.id || (same(a.maker, b.maker) && same(a.family, b.family));

/**
 * Whether two connector halves may be mated: identical type and maker, or a pair that is documented as intermatable. That
 * halves click together proves nothing; a mismatch heats up and can burn. null: the half's type was not recorded.
 */
export function connectorPairFinding(
  a: ConnectorIdentity | null,
  b: ConnectorIdentity | null,
  pairs: readonly DocumentedPair[],
): ConnectorPairFinding {
  if (!a || !b)
    return {
      outcome: 'unknown',
      fireRisk: true,
      words: !a && !b ? said.neitherRecorded : said.oneNotRecorded,
      clause: CONNECTOR_CLAUSE,
      remedy: said.readBoth,
      evidence: null,
    };
  const [first, second] = [`${a.maker} ${a.family}`, `${b.maker} ${b.family}`];
  if (isIdenticalConnector(a, b))
    return {
      outcome: 'identical',
      fireRisk: false,
      words: said.identical(first),
      clause: CONNECTOR_CLAUSE,
      remedy: null,
      evidence: null,
    };
  const pair = pairs.find(
    (p) => (p.first === a.id && p.second === b.id) || (p.first === b.id && p.second === a.id),
  );
  if (pair)
    return {
      outcome: 'documented',
      fireRisk: false,
      words: said.documented(first, second),
      clause: CONNECTOR_CLAUSE,
      remedy: null,
      evidence: pair.evidence,
    };
  return {
    outcome: 'not_documented',
    fireRisk: true,
    words: said.notDocumented(first, second),
    clause: CONNECTOR_CLAUSE,
    remedy: said.fitIdentical,
    evidence: null,
  };
}
