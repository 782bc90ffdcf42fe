import type { CustomerSite } from '../../schemas/api/customer';

export interface DayHours {
  made: { hour: number; value: number | null }[];
  clear: { hour: number; value: number }[];
  rows: { at: string; made: number | null; clear: number }[];
}
const HOUR_MS = 3_600_000;
const HALF_QUARTER_H = 0.125;

/**
 * The day in hours since its midnight at the site, each quarter at its middle. A quarter that has passed and is not
 * known is a gap; the quarter that is running and those to come are left out.
 */
export function dayHours(today: CustomerSite['today'], at: string): DayHours {
  const start = Date.parse(today.from);
  const hourOf = (iso: string) => (Date.parse(iso) - start) / HOUR_MS + HALF_QUARTER_H;
  const made = new Map(today.made.map((p) => [Date.parse(p.at), p.power]));
  const newest = Math.max(...made.keys());
  const now = Date.parse(at);
  const past = today.clear.filter(
    (p) => Date.parse(p.at) <= Math.max(newest, now - HOUR_MS / 2) && Date.parse(p.at) < now,
  );
  return {
    made: past.map((p) => ({ hour: hourOf(p.at), value: made.get(Date.parse(p.at)) ?? null })),
    clear: today.clear.map((p) => ({ hour: hourOf(p.at), value: p.power })),
    rows: today.clear
      .filter((p) => p.power > 0 || (made.get(Date.parse(p.at)) ?? 0) > 0)
      .map((p) => ({ at: p.at, made: made.get(Date.parse(p.at)) ?? null, clear: p.power })),
  };
}
