import { groupedBy } from '../../domain/grouped-by';
import type { CauseNow, SiteNow } from '../../schemas/api/now';
import { asIngest, type Tx } from '../db/transaction';
import { sitesNow } from '../queries/sites-now';
import { siteRefs } from '../queries/visible-site';
import { causesNow } from './causes';

/** Lines and causes also follow from time passing, with no word from the site: so they are read anew after this. */
const KEPT_MS = 30_000;
/** Not all sites of a fleet at once. */
const SPREAD_S = 30;
/** Sites that were asked for within this time are read ahead of the next who asks. */
const WANTED_MS = 10 * 60_000;
/** What would have to be read within this time is read ahead. */
const AHEAD_MS = 5_000;
/** So many sites in one reading ahead: nobody waits behind it. */
const AT_ONCE = 100;

/** How sites stand: their lines in lists, and what explains the units there that are not as they should be. */
export interface FleetStanding {
  sites: SiteNow[];
  causes: CauseNow[];
}
export interface SiteStanding {
  site: SiteNow;
  causes: CauseNow[];
}
interface Kept extends SiteStanding {
  untilMs: number;
}

/**
 * How the sites of a fleet stand, for pages and /live: read where something changed or time has passed, kept elsewhere. Of
 * a thousand sites a few dozen change in a second. Nothing is kept while nobody tells of changes.
 */
export class KeptSites {
  private readonly kept = new Map<number, Kept>();
  private readonly wanted = new Map<number, number>();
  /** What changes while it is being read is not kept. */
  private readonly readings = new Set<Set<number> & { everything?: boolean }>();

  /** @param hears whether changes are told of now */
  constructor(private hears: () => boolean = () => false) {}

  /** From now on changes are told of, as long as `hears` says so. */
  heardBy(hears: () => boolean): void {
    this.hears = hears;
    this.missed();
  }

  /** Something about these sites is new. */
  changed(siteIds: Iterable<number>): void {
    for (const id of siteIds) {
      this.kept.delete(id);
      for (const reading of this.readings) reading.add(id);
    }
  }

  /** Changes may have been missed: whoever tells of them was away. */
  missed(): void {
    this.kept.clear();
    for (const reading of this.readings) reading.everything = true;
  }

  /**
   * How the sites of these numbers stand, in their order; those that are gone are left out. Whoever calls has checked that
   * the actor may see them.
   */
  async read(tx: Tx, at: Date, siteIds: readonly number[]): Promise<FleetStanding> {
    const standings = await this.readEach(tx, at, siteIds);
    return { sites: standings.map((s) => s.site), causes: standings.flatMap((s) => s.causes) };
  }

  /** The same site by site; the lists of a site are the same objects as long as it is kept. */
  async readEach(tx: Tx, at: Date, siteIds: readonly number[]): Promise<SiteStanding[]> {
    const nowMs = at.getTime();
    if (!this.hears()) return inOrder(siteIds, await readSites(tx, at, siteIds));
    // taken before anything is waited for: what changes meanwhile is no longer kept then
    const standings = new Map<number, SiteStanding>();
    for (const id of siteIds) {
      this.wanted.set(id, nowMs);
      const kept = this.kept.get(id);
      if (kept && kept.untilMs > nowMs) standings.set(id, kept);
    }
    const asked = siteIds.filter((id) => !standings.has(id));
    if (asked.length > 0)
      for (const [id, standing] of await this.readAndKeep(tx, at, asked)) standings.set(id, standing);
    return inOrder(siteIds, standings);
  }

  /** Reads anew what changed or is about to be old, of the sites that were asked for lately: whoever asks next need not wait. */
  async readAhead(at: Date): Promise<void> {
    const nowMs = at.getTime();
    for (const [id, wantedMs] of this.wanted)
      if (nowMs - wantedMs > WANTED_MS) {
        this.wanted.delete(id);
        this.kept.delete(id);
      }
    if (!this.hears()) return;
    const old = [...this.wanted.keys()].filter((id) => (this.kept.get(id)?.untilMs ?? 0) <= nowMs + AHEAD_MS);
    for (let from = 0; from < old.length; from += AT_ONCE)
      await asIngest((tx) => this.readAndKeep(tx, at, old.slice(from, from + AT_ONCE)));
  }

  private async readAndKeep(tx: Tx, at: Date, asked: readonly number[]): Promise<Map<number, SiteStanding>> {
    const reading: Set<number> & { everything?: boolean } = new Set<number>();
    this.readings.add(reading);
    try {
      const found = await readSites(tx, at, asked);
      for (const id of asked) {
        const standing = found.get(id);
        if (!standing || reading.everything || reading.has(id)) this.kept.delete(id);
        else this.kept.set(id, { ...standing, untilMs: at.getTime() + KEPT_MS + (id % SPREAD_S) * 1000 });
      }
      return found;
    } finally {
      this.readings.delete(reading);
    }
  }
}

const inOrder = (siteIds: readonly number[], found: ReadonlyMap<number, SiteStanding>): SiteStanding[] =>
  siteIds.flatMap((id) => found.get(id) ?? []);

async function readSites(tx: Tx, at: Date, siteIds: readonly number[]): Promise<Map<number, SiteStanding>> {
  if (siteIds.length === 0) return new Map();
  const sites = new Map((await sitesNow(tx, at, siteIds)).map((site) => [site.id, site]));
  const causes = groupedBy(await causesNow(tx, at, siteIds), (cause) => cause.siteId);
  return new Map(
    (await siteRefs(tx, siteIds)).flatMap(({ id, ref }) => {
      const site = sites.get(ref);
      return site ? [[id, { site, causes: causes.get(ref) ?? [] }] as const] : [];
    }),
  );
}

// one per process: pages and the hub of /live are bundled apart
const KEY = Symbol.for('wakeline.kept-sites');
const shared = globalThis as unknown as Record<symbol, KeptSites | undefined>;

/** What this process keeps. */
export const keptSites = (): KeptSites => (shared[KEY] ??= new KeptSites());
