import { eveningOf } from '../../domain/output/evening';
import { asIngest } from '../db/transaction';
import { nightSites, type NightSite } from '../queries/output-days';
import { rollupWatermark } from '../queries/rollup';

/** Reports of the last light come late: so long after sunset a day is judged. */
export const AFTER_SUNSET_S = 45 * 60;

/** The newest local day of a site that is over, rolled up and not judged; null: none. */
export function dueDay(site: NightSite, nowS: number, rolledUpS: number): string | null {
  for (const day of [...site.days].reverse()) {
    const evening = eveningOf(day.fromS, day.toS, site);
    if (evening + AFTER_SUNSET_S > nowS || evening > rolledUpS) continue;
    return site.judged === null || site.judged < day.day ? day.day : null;
  }
  return null;
}

/** The sites whose night is due, each after its own sunset. */
export function nightsDue(now: Date): Promise<{ siteId: number; day: string }[]> {
  return asIngest(async (tx) => {
    const rolledUp = await rollupWatermark(tx);
    if (!rolledUp) return [];
    return (await nightSites(tx, now)).flatMap((site) => {
      const day = dueDay(site, now.getTime() / 1000, rolledUp.getTime() / 1000);
      return day === null ? [] : [{ siteId: site.id, day }];
    });
  });
}
