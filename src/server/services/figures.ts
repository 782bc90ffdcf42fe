import { figuresOf, lossSteps, sameDays, type DaySums } from '../../domain/output/day-figures';
import {
  dayAfter,
  daysAlike,
  daysBetween,
  elapsedOf,
  periodOf,
  yearBefore,
  type Period,
} from '../../domain/output/period';
import { worthOf } from '../../domain/output/tariff';
import { thresholdsOf } from '../../domain/settings/thresholds';
import { lossOf } from '../../words/domain-losses';
import type { Actor } from '../../domain/access/permissions';
import type { z } from 'zod';
import type { FleetFigures, FleetFiguresRow, SiteFigures, newTariff } from '../../schemas/api/figures';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import {
  addTariff,
  figuresSites,
  fleetMonths,
  fleetSums,
  fleetWorth,
  instantsOf,
  lossesIn,
  removeTariff,
  siteSums,
  tariffsOf,
  type FiguresSiteRow,
} from '../queries/figures';
import { importedSiteDays } from '../queries/history-readings';
import { tellSiteChanged } from '../queries/live-notices';
import { addAuditEntry } from '../queries/people';
import { figureRefusals } from '../../words/refusals-history';

/** The irradiance-weighted temperature of this many days before the end of a period stands for a year's. */
const YEAR_DAYS = 365;
/** Fewer days of light than this say nothing of a year. */
const YEAR_DAYS_MIN = 300;

const monthOf = (day: string): Period => {
  const period = periodOf(day.slice(0, 7));
  if (!period) throw new RangeError(figureRefusals.noDay(day));
  return period;
};

async function annualTemperature(tx: Tx, siteId: number, before: string): Promise<number | null> {
  const months = await siteSums(tx, siteId, { from: dayAfter(before, -YEAR_DAYS), before }, 'month');
  const light = months.reduce((sum, m) => sum + (m.light?.days ?? 0), 0);
  return light < YEAR_DAYS_MIN ? null : figuresOf(months, YEAR_DAYS).irradianceWeightedTemperature;
}

/** Whole days of a span: today is not over, and would be held against a whole day. */
const wholeDays = (
  elapsed: { from: string; before: string },
  today: string,
): { from: string; before: string } => ({
  from: elapsed.from,
  before: elapsed.before > today ? today : elapsed.before,
});

/**
 * The same whole days a year earlier, where the plant was there on all of them. Days without data are left out of both
 * years: what did not come is no loss.
 */
async function comparison(
  tx: Tx,
  site: FiguresSiteRow,
  sums: readonly DaySums[],
  whole: { from: string; before: string },
): Promise<SiteFigures['compared']> {
  if (whole.before <= whole.from) return null;
  const from = yearBefore(whole.from);
  if (site.firstDay === null || site.firstDay > from) return null;
  const before = dayAfter(yearBefore(dayAfter(whole.before, -1)));
  const days = await siteSums(tx, site.id, { from, before });
  const same = sameDays(
    sums.filter((d) => d.day < whole.before),
    days,
  );
  if (same.days === 0) return null;
  const missing = daysBetween(whole.from, whole.before) - same.days;
  return { nowKWh: same.now / 1000, beforeKWh: same.before / 1000, missing };
}

async function importedIn(tx: Tx, siteId: number, period: Period): Promise<SiteFigures['imported']> {
  const days = await importedSiteDays(tx, [siteId], period.from, dayAfter(period.before, -1));
  return days.flatMap(({ day, energyAc, energyDc }) => {
    const energy = energyAc ?? energyDc;
    return energy === null
      ? []
      : [{ day, energyKWh: energy / 1000, side: energyAc === null ? ('dc' as const) : ('ac' as const) }];
  });
}

/**
 * What a site made in a month or year, with all that its page and its report show.
 * @param key month or year; without one the present month of the site
 * @throws AppError not_found
 */
export async function siteFigures(
  tx: Tx,
  ref: string,
  key: string | undefined,
  at: Date,
): Promise<SiteFigures> {
  const site = found((await figuresSites(tx, at, ref))[0], 'site');
  const period = (key === undefined ? null : periodOf(key)) ?? monthOf(site.today);
  const elapsed = site.firstDay === null ? null : elapsedOf(period, site.firstDay, site.today);
  const sums = elapsed ? await siteSums(tx, site.id, elapsed) : [];
  const annual = elapsed ? await annualTemperature(tx, site.id, elapsed.before) : null;
  const instants = await instantsOf(tx, site.timeZone, elapsed ?? period);
  const losses = elapsed ? await lossesIn(tx, site.id, instants) : [];
  const tariffs = (await tariffsOf(tx, [site.id])).get(site.id) ?? [];
  const year = Number(period.key.slice(0, 4));
  const months = await siteSums(
    tx,
    site.id,
    { from: `${year - 1}-01-01`, before: `${year + 1}-01-01` },
    'month',
  );
  const byKind = new Map<string, number>();
  for (const l of losses) byKind.set(l.kind, (byKind.get(l.kind) ?? 0) + l.lossWh / 1000);
  return {
    at: at.toISOString(),
    site: {
      id: site.ref,
      name: site.name,
      place: site.place,
      timeZone: site.timeZone,
      organisation: site.organisation,
      nameplate: site.nameplate,
      firstDay: site.firstDay,
    },
    today: site.today,
    period,
    elapsed,
    now: elapsed ? figuresOf(sums, elapsed.days, annual) : null,
    compared: elapsed ? await comparison(tx, site, sums, wholeDays(elapsed, site.today)) : null,
    worth: worthOf(
      sums.map((d) => ({ day: d.day, energyKWh: d.energyAc / 1000 })),
      tariffs,
    ),
    currency: site.currency,
    incompleteBelow: thresholdsOf(site.thresholds).incompleteBelow,
    days: sums.map((d) => ({ day: d.day, figures: figuresOf([d], 1, annual) })),
    imported: await importedIn(tx, site.id, period),
    steps: lossSteps(
      sums,
      [...byKind].map(([kind, kWh]) => ({ label: lossOf(kind) ?? figureRefusals.otherCauses, kWh })),
    ),
    losses: losses.map((l) => ({
      cause: l.ref,
      kind: l.kind,
      headline: l.headline,
      since: l.since.toISOString(),
      closedAt: l.closedAt?.toISOString() ?? null,
      kWh: l.lossWh / 1000,
    })),
    months: months.map((m) => ({
      year: Number(m.day.slice(0, 4)),
      month: Number(m.day.slice(5, 7)),
      days: m.days,
      energyKWh: m.energyAc / 1000,
      performanceRatio: figuresOf([m], m.days).performanceRatio,
    })),
    tariffs: tariffs.map((t) => ({ id: t.ref, from: t.from, priceKWh: t.priceKWh, by: t.createdBy })),
  };
}

/** The figures of every operating site in a month or year; a plant that began within it counts from its first day. */
export async function fleetFigures(tx: Tx, key: string | undefined, at: Date): Promise<FleetFigures> {
  const sites = (await figuresSites(tx, at)).filter((s) => s.stage === 'operating');
  const today = sites.reduce(
    (latest, s) => (s.today > latest ? s.today : latest),
    at.toISOString().slice(0, 10),
  );
  const period = (key === undefined ? null : periodOf(key)) ?? monthOf(today);
  const elapsed = elapsedOf(period, null, today);
  const span = elapsed ?? { from: period.from, before: period.from };
  const ids = sites.map((s) => s.id);
  const whole = wholeDays(span, today);
  const last = { from: yearBefore(whole.from), before: yearBefore(whole.before) };
  const sums = await fleetSums(tx, ids, span);
  const sumsWhole = whole.before === span.before ? sums : await fleetSums(tx, ids, whole);
  const sumsLast = whole.before > whole.from ? await fleetSums(tx, ids, last) : new Map<number, DaySums>();
  const worth = await fleetWorth(tx, ids, span);
  const year = Number(period.key.slice(0, 4));
  const months = await fleetMonths(tx, ids, { from: `${year - 1}-01-01`, before: `${year + 1}-01-01` });
  const rows: FleetFiguresRow[] = [];
  for (const site of sites) {
    const entry = sums.get(site.id);
    if (!entry) continue;
    const own = elapsedOf(period, site.firstDay, site.today);
    const comparable = site.firstDay !== null && site.firstDay <= last.from;
    const before = comparable ? sumsLast.get(site.id) : undefined;
    const made = sumsWhole.get(site.id);
    const money = worth.get(site.id);
    rows.push({
      site: { id: site.ref, name: site.name, place: site.place },
      now: figuresOf([entry], Math.max(own?.days ?? 0, entry.days)),
      compared:
        before && made && daysAlike(made.days, before.days)
          ? { nowKWh: made.energyAc / 1000, beforeKWh: before.energyAc / 1000, missing: 0 }
          : null,
      worth: money ? { money: money.money, unpricedKWh: money.unpriced / 1000 } : null,
    });
  }
  return {
    at: at.toISOString(),
    today,
    period,
    currency: sites[0]?.currency ?? null,
    rows,
    ...totals(rows, sites, sums, period),
    months: months.map((m) => ({
      year: Number(m.month.slice(0, 4)),
      month: Number(m.month.slice(5)),
      energyKWh: m.energy / 1000,
    })),
    without: sites.filter((s) => !sums.has(s.id)).map((s) => s.name),
  };
}

/** Of all sites together: plants stand side by side, so nameplates add up where days would be averaged. */
function totals(
  rows: readonly FleetFiguresRow[],
  sites: readonly FiguresSiteRow[],
  sums: Awaited<ReturnType<typeof fleetSums>>,
  period: Period,
): Pick<FleetFigures, 'total' | 'compared' | 'worth'> {
  if (rows.length === 0) return { total: null, compared: null, worth: null };
  const entries = sites.flatMap((s) => sums.get(s.id) ?? []);
  const asked = sites.reduce(
    (days, s) =>
      sums.has(s.id)
        ? days + Math.max(elapsedOf(period, s.firstDay, s.today)?.days ?? 0, sums.get(s.id)?.days ?? 0)
        : days,
    0,
  );
  const nameplate = entries.reduce((sum, e) => sum + (e.nameplate ?? 0), 0);
  const named = entries.reduce((sum, e) => sum + (e.nameplate ? e.energyAc : 0), 0);
  const compared = rows.flatMap((r) => r.compared ?? []);
  const priced = rows.flatMap((r) => r.worth ?? []);
  return {
    total: {
      ...figuresOf(entries, Math.max(1, asked)),
      specificYieldKWhKWp: nameplate > 0 ? named / nameplate : null,
    },
    compared:
      compared.length === rows.length
        ? {
            nowKWh: compared.reduce((sum, c) => sum + c.nowKWh, 0),
            beforeKWh: compared.reduce((sum, c) => sum + c.beforeKWh, 0),
            missing: 0,
          }
        : null,
    worth:
      priced.length > 0
        ? {
            money: priced.reduce((sum, w) => sum + w.money, 0),
            unpricedKWh:
              priced.reduce((sum, w) => sum + w.unpricedKWh, 0) +
              rows.reduce((sum, r) => sum + (r.worth ? 0 : r.now.energyKWh), 0),
          }
        : null,
  };
}

/** Sets what a kWh is worth from a day on. @throws AppError not_found, conflict */
export async function setTariff(
  tx: Tx,
  actor: Actor,
  ref: string,
  tariff: z.output<typeof newTariff>,
  from: { at: Date; address: string },
): Promise<void> {
  const site = found((await figuresSites(tx, from.at, ref))[0], 'site');
  if (!(await addTariff(tx, { siteId: site.id, ...tariff, personId: actor.personId })))
    throw new AppError('conflict', {
      message: figureRefusals.priceFromTaken(tariff.from),
      fields: [{ field: 'from', message: figureRefusals.priceTaken }],
    });
  await addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address: from.address,
    action: 'tariff.set',
    subject: `tariff from ${tariff.from}`,
    after: { from: tariff.from, priceKWh: tariff.priceKWh },
    siteId: site.id,
  });
  await tellSiteChanged(tx, site.id);
}

/** @throws AppError not_found */
export async function dropTariff(
  tx: Tx,
  actor: Actor,
  where: { site: string; tariff: string },
  from: { at: Date; address: string },
): Promise<void> {
  const site = found((await figuresSites(tx, from.at, where.site))[0], 'site');
  const before = found(await removeTariff(tx, site.id, where.tariff), 'price');
  await addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address: from.address,
    action: 'tariff.removed',
    subject: `tariff from ${before.from}`,
    before,
    siteId: site.id,
  });
  await tellSiteChanged(tx, site.id);
}
