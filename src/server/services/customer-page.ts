import {
  DATASHEET_SCALE,
  QUARTER_MS,
  clearDay,
  ownBestScale,
  type ArrayAtPlace,
} from '../../domain/output/clear-day';
import { dayAfter } from '../../domain/output/period';
import { sunRiseSet } from '../../domain/photovoltaics/sun/rise-set';
import type { CustomerNow, CustomerSite, CustomerSites } from '../../schemas/api/customer';
import type { SiteNow } from '../../schemas/api/now';
import type { Tx } from '../db/transaction';
import { found } from '../errors';
import {
  daysOf,
  lastTestOf,
  localDayOf,
  quartersOf,
  roofRows,
  type DaysRow,
  type QuarterRow,
  type RoofRow,
} from '../queries/customer';
import { fleetWorth, monthsWithDays } from '../queries/figures';
import { packsOf } from '../queries/handover';
import { sitesNow } from '../queries/sites-now';

/** Days of the site's own quarters that its clear day is scaled to. */
const OWN_BEST_DAYS = 60;
const DAY_MS = 86_400_000;
/** Months whose report is offered. */
const REPORTS_SHOWN = 13;
/** Between the days whose daylight is reckoned; those between are taken to be alike. */
const DAYLIGHT_STEP_DAYS = 7;

function nowOf(roof: RoofRow, site: SiteNow, at: Date): CustomerNow {
  return {
    at: at.toISOString(),
    stage: site.stage,
    modules: roof.modules,
    reporting: roof.reporting,
    passing: site.counts.passing,
    shutdown: site.counts.shutdown,
    unheard: site.counts.unheard,
    silent: site.counts.silent,
    dark: site.counts.dark,
    stuck: site.counts.stuck,
    notShuttingDown: site.counts.notShuttingDown,
    unconfirmed: site.counts.unconfirmed,
    stringsNotShuttingDown: roof.stringsNotShuttingDown,
    power: site.power,
    madeLast: site.madeLast,
    daylight: site.daylight,
    loggers: roof.loggers,
    quietLoggers: roof.quietLoggers,
    lastSpokeAt: roof.lastSpokeAt?.toISOString() ?? null,
    zones: roof.zones,
    commands: site.commands,
    inShutdownSince: site.inShutdownSince,
    inverters: {
      total: roof.inverters,
      gridLost: roof.gridLost,
      fault: roof.inverterFaults,
      limited: roof.limited,
    },
  };
}

const energyOf = (points: readonly { power: number }[]): number =>
  points.reduce((sum, p) => sum + (p.power * QUARTER_MS) / 3_600_000, 0);

function todayOf(
  roof: RoofRow,
  day: { day: string; from: Date; to: Date },
  quarters: readonly QuarterRow[],
): CustomerSite['today'] {
  const array: ArrayAtPlace = { ...roof, planes: roof.planes };
  const past = quarters.map((q) => ({ atMs: q.at.getTime(), power: q.power }));
  const best = ownBestScale(
    past.filter((q) => q.atMs < day.from.getTime()),
    array,
  );
  const made = past.filter((q) => q.atMs >= day.from.getTime());
  const clear = clearDay(day.from.getTime(), day.to.getTime(), array, best ?? DATASHEET_SCALE);
  const counted = new Set(made.map((q) => q.atMs));
  const points = (list: typeof clear) =>
    list.map((p) => ({ at: new Date(p.atMs).toISOString(), power: p.power }));
  return {
    day: day.day,
    from: day.from.toISOString(),
    to: day.to.toISOString(),
    made: points(made),
    energy: made.length > 0 ? energyOf(made) : null,
    clear: points(clear),
    clearFrom: best === null ? 'datasheet' : 'own_best',
    clearEnergyUntilNow: energyOf(clear.filter((p) => counted.has(p.atMs))),
  };
}

/** Minutes of daylight on the days from `first` to `last`, both counted. */
function daylightMinutes(roof: RoofRow, first: string, last: string): number {
  const from = Date.parse(`${first}T12:00:00Z`);
  const days = Math.round((Date.parse(`${last}T12:00:00Z`) - from) / DAY_MS) + 1;
  let minutes = 0;
  for (let i = 0; i < days; i += DAYLIGHT_STEP_DAYS) {
    const { sunrise, sunset, sunUp } = sunRiseSet(from + i * DAY_MS, roof, { beyondDay: 'actual' });
    const day =
      sunrise !== null && sunset !== null ? (sunset - sunrise) / 60_000 : sunUp === 'all_day' ? 1440 : 0;
    minutes += day * Math.min(DAYLIGHT_STEP_DAYS, days - i);
  }
  return minutes;
}

function lifeOf(roof: RoofRow, days: DaysRow, today: number): CustomerSite['life'] {
  const from = roof.switchedOnOn;
  if (!from) return null;
  const daylight = days.first && days.last ? daylightMinutes(roof, days.first, days.last) : 0;
  return {
    from,
    countedFrom: days.first && days.first > from ? days.first : null,
    energy: days.energy + today,
    workingTime: daylight > 0 ? Math.max(0, 1 - days.lostMinutes / daylight) : null,
    lostMinutes: days.lostMinutes,
    lostMinutesGrid: days.lostMinutesGrid,
    completeness: days.completeness ?? 1,
  };
}

async function worthOfRoof(
  tx: Tx,
  roof: RoofRow,
  from: { month: string; year: string; before: string },
): Promise<CustomerSite['worth']> {
  if (!roof.currency) return null;
  const { before } = from;
  const span = async (first: string) =>
    (await fleetWorth(tx, [roof.siteId], { from: first, before })).get(roof.siteId);
  const life = await span(roof.switchedOnOn ?? from.year);
  if (!life) return null;
  return {
    currency: roof.currency,
    month: (await span(from.month))?.money ?? null,
    year: (await span(from.year))?.money ?? null,
    life: life.money,
    partly: life.unpriced > 0,
  };
}

/**
 * What the page for the owner of a roof rests on. Days are the site's own; today is counted from its quarters,
 * earlier days from their sums.
 * @throws AppError not_found
 */
export async function customerSite(tx: Tx, ref: string, at: Date): Promise<CustomerSite> {
  const roof = found((await roofRows(tx, at, ref))[0], 'site');
  const [site] = await sitesNow(tx, at, [roof.siteId]);
  const day = await localDayOf(tx, roof.timeZone, at);
  const monthFirst = `${day.day.slice(0, 8)}01`;
  const quarters = await quartersOf(
    tx,
    roof.siteId,
    new Date(day.from.getTime() - OWN_BEST_DAYS * DAY_MS),
    day.to,
  );
  const month = await daysOf(tx, roof.siteId, monthFirst, day.day);
  const life = await daysOf(tx, roof.siteId, roof.switchedOnOn ?? day.day, day.day);
  const today = todayOf(roof, day, quarters);
  const yearFirst = `${day.day.slice(0, 4)}-01-01`;
  const year = await daysOf(
    tx,
    roof.siteId,
    roof.switchedOnOn && roof.switchedOnOn > yearFirst ? roof.switchedOnOn : yearFirst,
    day.day,
  );
  return {
    site: {
      id: roof.ref,
      name: roof.name,
      place: roof.place,
      timeZone: roof.timeZone,
      switchedOnOn: roof.switchedOnOn,
      shutdownSwitchPlace: roof.shutdownSwitchPlace,
      strings: roof.strings,
      ruleSet: roof.ruleSet,
    },
    care: { organisation: roof.organisation, phone: roof.organisationPhone ?? '', logo: roof.logo },
    now: nowOf(roof, found(site, 'site'), at),
    today,
    month: {
      first: monthFirst,
      energy: month.energy + (today.energy ?? 0),
      expected: month.expected,
      measured: month.measured,
      days: month.days,
    },
    year: roof.switchedOnOn ? { first: yearFirst, energy: year.energy + (today.energy ?? 0) } : null,
    life: lifeOf(roof, life, today.energy ?? 0),
    worth: await worthOfRoof(tx, roof, { month: monthFirst, year: yearFirst, before: dayAfter(day.day) }),
    lastTest: await lastTestOf(tx, roof.siteId),
    papers: (await packsOf(tx, roof.siteId)).map((p) => ({
      ref: p.ref,
      version: p.version,
      madeAt: p.madeAt.toISOString(),
      pdfBytes: p.pdfBytes,
    })),
    months: await monthsWithDays(tx, roof.siteId, REPORTS_SHOWN),
  };
}

/** Every roof that the actor may see, in a line each. */
export async function customerSites(tx: Tx, at: Date): Promise<CustomerSites> {
  const roofs = await roofRows(tx, at);
  const sites = new Map(
    (
      await sitesNow(
        tx,
        at,
        roofs.map((r) => r.siteId),
      )
    ).map((s) => [s.id, s]),
  );
  return roofs.flatMap((roof) => {
    const site = sites.get(roof.ref);
    return site
      ? {
          id: roof.ref,
          name: roof.name,
          place: roof.place,
          timeZone: roof.timeZone,
          now: nowOf(roof, site, at),
        }
      : [];
  });
}
