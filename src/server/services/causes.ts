import { groupedBy } from '../../domain/grouped-by';
import { causesOf } from '../../domain/causes/causes';
import type { Cause, SiteCondition, SlotCondition } from '../../domain/causes/site';
import { UNIT_STATES, VERDICTS } from '../../domain/verdicts/codes';
import { listed } from '../../drawings/numbers';
import type { CauseNow } from '../../schemas/api/now';
import type { Tx } from '../db/transaction';
import { causeSites, type CauseSiteRow, type CauseStringRow } from '../queries/causes';
import { causeHeadlines } from '../../words/domain-causes';
import { causeWords } from '../../words/refusals-cases';

const iso = (atS: number): string => new Date(atS * 1000).toISOString();

function slotsOf(string: CauseStringRow, gateways: ReadonlyMap<string, string>): SlotCondition[] {
  return string.positions.map((position, i) => {
    const at = position - 1;
    const via = string.via?.[at] ?? null;
    const state = string.state?.[at] ?? null;
    return {
      position,
      serial: string.serials[i] ?? null,
      state: state === null ? null : (UNIT_STATES[state] ?? null),
      verdict: VERDICTS[string.verdict?.[at] ?? 0] ?? 'ok',
      sinceS: string.since?.[at] ?? 0,
      seenS: string.seen?.[at] || null,
      gateway: via === null ? null : (gateways.get(`${string.loggerId} ${via}`) ?? `${via}`),
    };
  });
}

/** A unit is silent after three report intervals: an input's reading is of now while it is newer than that. */
const FRESH_INTERVALS = 3;

/** A site's rows as the search for causes takes them. */
export function conditionOf(row: CauseSiteRow, at: Date): SiteCondition {
  const atS = at.getTime() / 1000;
  const gateways = new Map(row.gateways.map((g) => [`${g.loggerId} ${g.number}`, g.name]));
  return {
    name: row.name,
    atS,
    reportIntervalS: row.reportIntervalS,
    strings: row.strings.map((s) => ({
      id: s.ref,
      name: s.name,
      kind: s.kind,
      releasedBy: s.releasedBy,
      zone: s.zone,
      transmitters: s.transmitters,
      logger: s.logger,
      inverter: s.inverter,
      input: s.input,
      slots: slotsOf(s, gateways),
      finding:
        s.finding && s.evidence
          ? {
              kind: s.finding,
              sinceS: s.findingSince ? Math.floor(s.findingSince.getTime() / 1000) : s.evidence.atS,
              evidence: s.evidence,
            }
          : null,
    })),
    zones: row.zones,
    transmitters: row.transmitters,
    gateways: row.gateways,
    loggers: row.loggers.map((l) => ({
      name: l.name,
      connected:
        l.connected && l.lastSpokeS !== null && atS - l.lastSpokeS < 3 * Math.max(60, row.reportIntervalS),
    })),
    inputs: row.inputs.map((i) => ({
      inverter: i.inverter,
      number: i.number,
      // what was measured before the units fell silent says nothing of what flows now
      currentA:
        i.current === null ||
        i.atS === null ||
        atS - i.atS >= FRESH_INTERVALS * Math.max(60, row.reportIntervalS)
          ? null
          : i.current / 100,
    })),
  };
}

/**
 * Units that no part explains become one entry of a site and verdict: a person goes there once. What belongs to a
 * shared part stays as it is.
 */
export function together(causes: readonly Cause[]): Cause[] {
  const isAlone = (cause: Cause): boolean => cause.sharedPart?.kind === 'unit';
  const out = causes.filter((cause) => !isAlone(cause));
  for (const [verdict, singles] of groupedBy(causes.filter(isAlone), (cause) => cause.verdict)) {
    const first = singles[0];
    if (!first) continue;
    if (singles.length === 1) {
      out.push(first);
      continue;
    }
    const strings = [...new Set(singles.flatMap((c) => c.units.map((u) => u.stringName)))];
    out.push({
      ...first,
      key: `${verdict}:alone`,
      sinceS: Math.min(...singles.map((c) => c.sinceS)),
      sharedPart: null,
      headline: causeHeadlines.severalAlone(singles.length, verdict),
      evidence: causeWords.eachAlone(strings.length, listed(strings)),
      alternatives: [...new Set(singles.flatMap((c) => c.alternatives))],
      confidence: Math.min(...singles.map((c) => c.confidence)),
      units: singles.flatMap((c) => c.units),
    });
  }
  return out;
}

/** Power that stuck units hold back; the others still pass theirs, or nobody knows. */
export const lossOf = (cause: Cause, unitDayWh: number | null): number | null =>
  cause.verdict === 'stuck' && unitDayWh !== null
    ? cause.units.filter((u) => u.position !== null).length * unitDayWh || null
    : null;

function causeNow(site: CauseSiteRow, cause: Cause): CauseNow {
  return {
    key: `${cause.key}@${site.ref}`,
    verdict: cause.verdict,
    siteId: site.ref,
    siteName: site.name,
    since: iso(cause.sinceS),
    sharedPart: cause.sharedPart,
    headline: cause.headline,
    evidence: cause.evidence,
    alternatives: cause.alternatives,
    confidence: cause.confidence,
    units: cause.units.map((u) => ({
      stringId: u.stringId,
      stringName: u.stringName,
      position: u.position,
      serial: u.serial,
      since: iso(u.sinceS),
    })),
    lossWhPerDay: lossOf(cause, site.unitDayWh),
  };
}

/**
 * What explains the units that are not as they should be, at the sites that the actor sees or at those of the given
 * numbers. Three statements at most; the rest is arithmetic on what they brought.
 */
export async function causesNow(tx: Tx, at: Date, siteIds?: readonly number[]): Promise<CauseNow[]> {
  const sites = await causeSites(tx, siteIds);
  return sites.flatMap((site) => together(causesOf(conditionOf(site, at))).map((c) => causeNow(site, c)));
}
