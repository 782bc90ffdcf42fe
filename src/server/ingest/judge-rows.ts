import { UNIT_STATES, VERDICTS, codeOf, type EventKind } from '../../domain/verdicts/codes';
import type { UnitChange } from '../../domain/verdicts/evidence';
import { countUnits } from '../../domain/verdicts/memory';
import type { EventRow, JudgementRow, UnitEventRow } from '../queries/judgement';
import type { JudgedSite } from '../queries/judgement-contexts';
import type { JudgedNow, Outcome } from './judge-site';

/** From what judgement concluded to the rows that keep it. */

const literal = (values: readonly number[]): string =>
  `{${values.map((v) => (v < 0 ? 'NULL' : v)).join(',')}}`;

export function judgementRow({ memory, string, context, evidence }: JudgedNow, siteId: number): JudgementRow {
  return {
    stringId: string.id,
    siteId,
    frameAtS: memory.atS,
    state: literal(memory.state),
    verdict: literal(memory.verdict),
    since: literal(memory.since),
    finding: memory.finding?.kind ?? null,
    findingSinceS: memory.finding?.sinceS ?? null,
    evidence: JSON.stringify({ units: evidence, finding: memory.finding?.evidence ?? null }),
    kept: JSON.stringify({ memory, serials: string.serials }),
    counts: countUnits(memory, context.slots),
  };
}

const stateCode = (state: UnitChange['state']): number => (state === null ? -1 : codeOf(UNIT_STATES, state));

export function unitEventRows({ judged, outcome }: Outcome, siteId: number): UnitEventRow[] {
  return outcome.changes.map((c) => ({
    atS: c.atS,
    stringId: judged.string.id,
    position: c.position,
    siteId,
    state: stateCode(c.state),
    stateBefore: stateCode(c.stateBefore),
    verdict: codeOf(VERDICTS, c.verdict),
    verdictBefore: codeOf(VERDICTS, c.verdictBefore),
  }));
}

const TOLD: Partial<Record<UnitChange['verdict'], EventKind>> = {
  stuck: 'units_stuck',
  not_shutting_down: 'units_not_shutting_down',
  unconfirmed: 'units_unconfirmed',
};

/** What a change is called in the list of events; a change may be two things at once. */
function kindsOf(change: UnitChange): { kind: EventKind; from?: string }[] {
  const kinds: { kind: EventKind; from?: string }[] = [];
  if (change.verdict !== change.verdictBefore) {
    const kind = TOLD[change.verdict];
    if (kind) kinds.push({ kind });
    else if (change.verdict === 'ok' && TOLD[change.verdictBefore])
      kinds.push({ kind: 'units_recovered', from: change.verdictBefore });
  }
  if (change.state === 'silent' && change.stateBefore !== 'silent') kinds.push({ kind: 'units_silent' });
  if (change.stateBefore === 'silent' && (change.state === 'passing' || change.state === 'shutdown'))
    kinds.push({ kind: 'units_back' });
  return kinds;
}

/** Events of one string: the units of one instant that changed alike make one row. */
export function eventRows({ judged, outcome }: Outcome, site: JudgedSite): EventRow[] {
  const { string } = judged;
  const base = { organisationId: site.organisationId, siteId: site.id, stringId: string.id };
  const groups = new Map<string, { row: EventRow; positions: number[]; serials: (string | null)[] }>();
  for (const change of outcome.changes)
    for (const { kind, from } of kindsOf(change)) {
      const key = `${change.atS} ${kind} ${from ?? ''}`;
      let group = groups.get(key);
      if (!group) {
        const detail = from === undefined ? {} : { from };
        group = { row: { ...base, atS: change.atS, kind, detail }, positions: [], serials: [] };
        groups.set(key, group);
      }
      group.positions.push(change.position);
      group.serials.push(string.serials[change.slot] ?? null);
    }
  const rows = [...groups.values()].map(({ row, positions, serials }): EventRow => ({
    ...row,
    detail: { ...row.detail, positions, serials },
  }));
  const { finding } = outcome;
  if (!finding) return rows;
  const { atS, before, finding: now } = finding;
  if (before !== null && now?.kind !== before)
    rows.push({ ...base, atS, kind: 'string_finding_ended', detail: { finding: before } });
  if (now)
    rows.push({
      ...base,
      atS,
      kind: 'string_finding',
      detail: { finding: now.kind, evidence: now.evidence },
    });
  return rows;
}

/** The same unit twice at one instant is one row: from the first state to the last. */
export function mergeUnitEvents(rows: readonly UnitEventRow[]): UnitEventRow[] {
  const merged = new Map<string, UnitEventRow>();
  for (const row of rows) {
    const key = `${row.stringId} ${row.position} ${row.atS}`;
    const first = merged.get(key);
    if (first) Object.assign(first, { state: row.state, verdict: row.verdict });
    else merged.set(key, { ...row });
  }
  return [...merged.values()];
}
