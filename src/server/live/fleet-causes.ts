import type { CauseNow } from '../../schemas/api/now';
import type { Tx } from '../db/transaction';
import { siteRefs } from '../queries/visible-site';
import { causesNow } from '../services/causes';

/** Causes also follow from time passing, with no word from the site: so they are searched anew after this. */
const KEPT_MS = 30_000;
/** Not all sites of a fleet in one round. */
const SPREAD_S = 30;

/**
 * Causes of many sites for rounds that follow each other: searched where something changed, kept for a while elsewhere.
 * Of a thousand sites a few dozen change in a second.
 */
export class FleetCauses {
  private readonly kept = new Map<number, { untilMs: number; causes: CauseNow[] }>();

  async read(
    tx: Tx,
    at: Date,
    siteIds: readonly number[],
    changed: ReadonlySet<number>,
  ): Promise<CauseNow[]> {
    const nowMs = at.getTime();
    const asked = siteIds.filter((id) => changed.has(id) || (this.kept.get(id)?.untilMs ?? 0) <= nowMs);
    if (asked.length > 0) {
      const bySite = new Map<string, CauseNow[]>();
      for (const cause of await causesNow(tx, at, asked)) {
        const list = bySite.get(cause.siteId);
        if (list) list.push(cause);
        else bySite.set(cause.siteId, [cause]);
      }
      for (const { id, ref } of await siteRefs(tx, asked))
        this.kept.set(id, {
          untilMs: nowMs + KEPT_MS + (id % SPREAD_S) * 1000,
          causes: bySite.get(ref) ?? [],
        });
    }
    const wanted = new Set(siteIds);
    for (const id of this.kept.keys()) if (!wanted.has(id)) this.kept.delete(id);
    return siteIds.flatMap((id) => this.kept.get(id)?.causes ?? []);
  }
}
