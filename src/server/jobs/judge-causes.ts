import { causeChanges, type CauseChange, type FoundCause, type FoundUnit } from '../../domain/causes/changes';
import { causesOf } from '../../domain/causes/causes';
import { isHazardKind, LIVE_KINDS, PATIENCE, type CauseKind } from '../../domain/causes/kinds';
import { lightShare } from '../../domain/causes/loss';
import { isAlarm, unitsSay } from '../../domain/causes/says';
import type { Cause } from '../../domain/causes/site';
import { asIngest, type Tx } from '../db/transaction';
import { causeSites } from '../queries/causes';
import {
  addLosses,
  addSiteEvents,
  lockCauses,
  sitesToJudge,
  storedCauses,
  worksNow,
  writeCauseChange,
  type CauseRow,
  type CauseSiteFacts,
  type WrittenChange,
} from '../queries/causes-stored';
import { tellSiteChanged } from '../queries/live-notices';
import { conditionOf, lossOf } from '../services/causes';
import { judgeGateways } from './judge-gateways';

/** What a cause costs is added up so often while it lasts. */
const LOSS_EVERY_S = 900;

/**
 * Brings the causes of a site that follow its reports up to date, each change with its event in one transaction.
 * Running it twice, or being killed in it, changes nothing more.
 *
 * @returns how many changes were told
 */
export function judgeSiteCauses(siteId: number, at: Date): Promise<number> {
  return asIngest(async (tx) => {
    const site = await lockCauses(tx, siteId);
    const [row] = await causeSites(tx, [siteId], { sound: true });
    if (!site || !row) return 0;
    const condition = conditionOf(row, at);
    const gateways = await judgeGateways(tx, site, condition, at);
    const found = causesOf(condition)
      .filter((c) => isHazardKind(c.verdict) || (site.stage === 'operating' && isAlarm(c)))
      .map((c) => foundOf(c, site, row.unitDayWh));
    const says = unitsSay(condition);
    const told = await applyCauses(tx, site, {
      at,
      kinds: LIVE_KINDS,
      found,
      // what a site under construction does is no alarm, and what was one is none any more
      says: (kind, unit) =>
        site.stage === 'operating' || isHazardKind(kind) ? says(kind, unit) : ('gone' as const),
    });
    if (told + gateways > 0) await tellSiteChanged(tx, siteId);
    return told;
  });
}

/** The same for every site that has something to judge. One transaction each; one that fails doesn't keep the others. */
export async function judgeAllCauses(now: () => Date): Promise<{ sites: number; told: number }> {
  const ids = await asIngest((tx) => sitesToJudge(tx, LIVE_KINDS));
  const failures: unknown[] = [];
  let told = 0;
  for (const id of ids)
    try {
      told += await judgeSiteCauses(id, now());
    } catch (error) {
      failures.push(error);
    }
  if (failures.length > 0)
    throw new AggregateError(failures, `causes of ${failures.length} sites: ${String(failures[0])}`);
  return { sites: ids.length, told };
}

const foundOf = (c: Cause, site: CauseSiteFacts, unitDayWh: number | null): FoundCause => ({
  key: `${c.key}@${site.ref}`,
  kind: c.verdict,
  sharedPart: c.sharedPart,
  headline: c.headline,
  evidence: c.evidence,
  figures: {},
  alternatives: c.alternatives,
  confidence: c.confidence,
  units: c.units,
  sinceS: c.sinceS,
  lossWhDay: lossOf(c, unitDayWh),
});

export interface CauseRun {
  at: Date;
  /** The kinds that this run judges: others are left alone. */
  kinds: readonly CauseKind[];
  found: readonly FoundCause[];
  says: (kind: CauseKind, unit: FoundUnit) => 'shows' | 'well' | 'unknown' | 'gone';
}

/** Writes what becomes of a site's causes; the site is locked (`lockCauses`). */
export async function applyCauses(tx: Tx, site: CauseSiteFacts, run: CauseRun): Promise<number> {
  const nowS = run.at.getTime() / 1000;
  const longest = Math.max(...run.kinds.map((k) => PATIENCE[k].reopenS));
  const stored = await storedCauses(tx, site.id, run.kinds, new Date((nowS - longest) * 1000));
  const works = await worksNow(tx, site.id, run.at);
  const changes = causeChanges({
    nowS,
    stored,
    found: run.found,
    says: run.says,
    atRest: (unit) => works.some((strings) => strings === null || strings.includes(unit.stringId)),
  });
  await addLosses(tx, lossesOf(stored, changes, site, nowS), run.at);
  const written: WrittenChange[] = [];
  // a key that ends must be free before another row takes it
  const order = (c: CauseChange): number => (c.do === 'close' ? 0 : c.do === 'change' ? 1 : 2);
  for (const change of [...changes].sort((a, b) => order(a) - order(b))) {
    const row = await writeCauseChange(tx, site.id, change, run.at);
    if (row) written.push(row);
  }
  await addSiteEvents(
    tx,
    site,
    written.map((w) => eventOf(w, run.at)),
  );
  return written.length;
}

/** What open causes cost since it was last added up, by the light of that time. */
function lossesOf(
  stored: readonly CauseRow[],
  changes: readonly CauseChange[],
  site: CauseSiteFacts,
  nowS: number,
): { id: number; wh: number }[] {
  const ending = new Set(changes.flatMap((c) => (c.do === 'close' ? [c.stored.id] : [])));
  return stored.flatMap((c) => {
    if (c.closedS !== null || c.lossWhDay === null || !isAddedUp(c.kind)) return [];
    const fromS = c.lossUntilS ?? c.sinceS;
    if (nowS <= fromS || (nowS - fromS < LOSS_EVERY_S && !ending.has(c.id))) return [];
    return [{ id: c.id, wh: c.lossWhDay * lightShare(fromS, nowS, site) }];
  });
}

/** Low output is added up by the days that were judged, not by the clock. */
const isAddedUp = (kind: CauseKind): boolean => kind !== 'low_output';

const KIND_OF = {
  open: 'cause_opened',
  reopen: 'cause_reopened',
  change: 'cause_changed',
  close: 'cause_closed',
} as const;

function eventOf(
  { change, ref, lossWh }: WrittenChange,
  at: Date,
): {
  at: Date;
  kind: string;
  stringRef: string | null;
  detail: Record<string, unknown>;
} {
  const cause = change.do === 'close' ? change.stored : change.cause;
  const strings = [...new Set(cause.units.map((u) => u.stringId))];
  const base = {
    cause: ref,
    kind: cause.kind,
    headline: cause.headline,
    hazard: isHazardKind(cause.kind),
    units: cause.units.length,
  };
  const detail =
    change.do === 'close'
      ? { ...base, because: change.because, lossWh: Math.round(lossWh) }
      : change.do === 'change'
        ? { ...base, before: { headline: change.stored.headline, units: change.stored.units.length } }
        : base;
  return {
    at,
    kind: KIND_OF[change.do],
    stringRef: strings.length === 1 ? (strings[0] ?? null) : null,
    detail,
  };
}
