import { groupedBy } from '../../domain/grouped-by';
import type { DayLight, DaySums } from '../../domain/output/day-figures';
import type { TariffFrom } from '../../domain/output/tariff';
import type { Tx } from '../db/transaction';
import { SITE_VISIBLE } from './visible-site';

/** Sums of days, causes and prices that figures are made of. Sites were found as the actor. */

type SumsRow = Omit<DaySums, 'light'> & Omit<DayLight, 'days'> & { litDays: number };

const LIT = 'd.insolation is not null and d.nameplate > 0';
/** Insolation of several days is weighted by nameplate, so that its product with the mean nameplate is the sum. */
const weighted = (column: string): string =>
  `coalesce(sum(d.${column}::float8 * d.nameplate) filter (where ${LIT}) / nullif(avg(d.nameplate) filter (where ${LIT}), 0), 0)`;
const summed = (column: string): string => `coalesce(sum(d.${column}) filter (where ${LIT}), 0)::float8`;

const SUMS = `min(d.day)::text as day, count(*)::int as days, sum(d.energy_ac)::float8 as "energyAc",
  sum(d.energy_dc)::float8 as "energyDc", avg(d.nameplate)::float8 as nameplate, avg(d.gamma_pmp)::float8 as "gammaPmp",
  sum(d.complete)::float8 as complete, sum(d.lost_minutes)::int as "lostMinutes",
  sum(d.lost_minutes_grid)::int as "lostMinutesGrid", count(*) filter (where ${LIT})::int as "litDays",
  ${summed('quarters_due')} as "quartersDue", ${summed('quarters_lit')} as "quartersLit",
  ${weighted('insolation')} as insolation, ${summed('energy_ac_lit')} as "energyAcLit",
  ${summed('energy_dc_lit')} as "energyDcLit", ${summed('quarters_warm')} as "quartersWarm",
  ${weighted('insolation_warm')} as "insolationWarm", ${weighted('insolation_temperature')} as "insolationTemperature",
  ${summed('energy_ac_warm')} as "energyAcWarm", ${summed('minutes_lit')} as "minutesLit",
  ${summed('limited_minutes')} as "limitedMinutes", ${summed('lost_energy')} as "lostEnergy",
  ${summed('lost_energy_grid')} as "lostEnergyGrid"`;

function sumsOf(row: SumsRow): DaySums {
  const { day, days, energyAc, energyDc, nameplate, gammaPmp, complete, lostMinutes, lostMinutesGrid } = row;
  const { litDays, ...light } = row;
  return {
    day,
    days,
    energyAc,
    energyDc,
    nameplate,
    gammaPmp,
    complete,
    lostMinutes,
    lostMinutesGrid,
    light:
      litDays === 0
        ? null
        : {
            days: litDays,
            quartersDue: light.quartersDue,
            quartersLit: light.quartersLit,
            insolation: light.insolation,
            energyAcLit: light.energyAcLit,
            energyDcLit: light.energyDcLit,
            quartersWarm: light.quartersWarm,
            insolationWarm: light.insolationWarm,
            insolationTemperature: light.insolationTemperature,
            energyAcWarm: light.energyAcWarm,
            minutesLit: light.minutesLit,
            limitedMinutes: light.limitedMinutes,
            lostEnergy: light.lostEnergy,
            lostEnergyGrid: light.lostEnergyGrid,
          },
  };
}

/** Days of a site from `from` up to and without `before`, oldest first; by month each summed into one entry. */
export async function siteSums(
  tx: Tx,
  siteId: number,
  span: { from: string; before: string },
  by: 'day' | 'month' = 'day',
): Promise<DaySums[]> {
  const { rows } = await tx.raw<{ rows: SumsRow[] }>(
    `select ${SUMS} from site_day d where d.site_id = :siteId and d.day >= cast(:from as date) and d.day < cast(:before as date)
     group by ${by === 'day' ? 'd.day' : `date_trunc('month', d.day)`} order by 1`,
    { siteId, ...span },
  );
  return rows.map(sumsOf);
}

/** The days of several sites, each site's summed into one entry. */
export async function fleetSums(
  tx: Tx,
  siteIds: readonly number[],
  span: { from: string; before: string },
): Promise<Map<number, DaySums>> {
  const { rows } = await tx.raw<{ rows: (SumsRow & { siteId: number })[] }>(
    `select d.site_id as "siteId", ${SUMS} from site_day d
     where d.site_id = any (:siteIds) and d.day >= cast(:from as date) and d.day < cast(:before as date)
     group by d.site_id`,
    { siteIds: [...siteIds], ...span },
  );
  return new Map(rows.map(({ siteId, ...row }) => [siteId, sumsOf(row)]));
}

/** AC energy by month of all these sites, Wh; keys yyyy-mm. */
export async function fleetMonths(
  tx: Tx,
  siteIds: readonly number[],
  span: { from: string; before: string },
): Promise<{ month: string; energy: number }[]> {
  const { rows } = await tx.raw<{ rows: { month: string; energy: number }[] }>(
    `select to_char(d.day, 'YYYY-MM') as month, sum(d.energy_ac)::float8 as energy from site_day d
     where d.site_id = any (:siteIds) and d.day >= cast(:from as date) and d.day < cast(:before as date)
     group by 1 order by 1`,
    { siteIds: [...siteIds], ...span },
  );
  return rows;
}

export interface FiguresSiteRow {
  id: number;
  ref: string;
  name: string;
  place: string;
  timeZone: string;
  stage: 'commissioning' | 'operating';
  switchedOnOn: string | null;
  firstDay: string | null;
  today: string;
  nameplate: number | null; // W
  currency: string | null;
  thresholds: unknown;
  organisation: string;
}

/** Every visible site, or the one of the public identifier, by name, with its own date of today. */
export async function figuresSites(tx: Tx, at: Date, ref?: string): Promise<FiguresSiteRow[]> {
  const { rows } = await tx.raw<{ rows: FiguresSiteRow[] }>(
    `select site.id, site.ref, site.name, site.place, site.time_zone as "timeZone", site.stage,
            site.switched_on_on::text as "switchedOnOn", (select min(day)::text from site_day d where d.site_id = site.id) as "firstDay",
            (cast(:at as timestamptz) at time zone site.time_zone)::date::text as today,
            (select sum(m.vmp_ref::float8 * m.imp_ref) from slot join module_type m on m.id = slot.module_type_id
              where slot.site_id = site.id) as nameplate,
            o.currency, o.thresholds, o.name as organisation
     from site join organisation o on o.id = site.organisation_id
     where ${SITE_VISIBLE} and (cast(:ref as uuid) is null or site.ref = cast(:ref as uuid)) order by site.name`,
    { at, ref: ref ?? null },
  );
  return rows;
}

export interface LossRow {
  ref: string;
  kind: string;
  headline: string;
  since: Date;
  closedAt: Date | null;
  /** Wh that fall into the span, by its share of the time over which the loss was counted. */
  lossWh: number;
}

/** Causes whose loss touches the span, the dearest first. */
export async function lossesIn(
  tx: Tx,
  siteId: number,
  span: { from: Date; before: Date },
): Promise<LossRow[]> {
  const { rows } = await tx.raw<{ rows: LossRow[] }>(
    `select c.ref, c.kind, c.headline, c.since, c.closed_at as "closedAt",
            (case when c.loss_until > c.opened_at then c.loss_wh
               * extract(epoch from least(c.loss_until, :before) - greatest(c.opened_at, :from))
               / extract(epoch from c.loss_until - c.opened_at) else 0 end)::float8 as "lossWh"
     from cause c
     where c.site_id = :siteId and c.opened_at < :before and coalesce(c.closed_at, 'infinity') > :from
       and (c.loss_until is null or c.loss_until > :from)
     order by 6 desc, c.since`,
    { siteId, ...span },
  );
  return rows;
}

/** The instants between which a site's calendar days lie. */
export async function instantsOf(
  tx: Tx,
  timeZone: string,
  span: { from: string; before: string },
): Promise<{ from: Date; before: Date }> {
  const { rows } = await tx.raw<{ rows: { from: Date; before: Date }[] }>(
    `select cast(:from as timestamp) at time zone :timeZone as from, cast(:before as timestamp) at time zone :timeZone as before`,
    { timeZone, ...span },
  );
  const [row] = rows;
  if (!row) throw new Error('The database gave no instants for a span of days.');
  return row;
}

export interface TariffRow extends TariffFrom {
  ref: string;
  createdBy: string;
}

export async function tariffsOf(tx: Tx, siteIds: readonly number[]): Promise<Map<number, TariffRow[]>> {
  const { rows } = await tx.raw<{ rows: (TariffRow & { siteId: number })[] }>(
    `select t.ref, t.site_id as "siteId", t.from_on::text as from, t.price_kwh::float8 as "priceKWh", p.name as "createdBy"
     from tariff t join person p on p.id = t.created_by where t.site_id = any (:siteIds) order by t.from_on desc`,
    { siteIds: [...siteIds] },
  );
  return groupedBy(rows, (row) => row.siteId);
}

/** Prices by the public identifiers of sites that the actor sees; newest first. */
export async function tariffsByRef(tx: Tx, siteRefs: readonly string[]): Promise<Map<string, TariffFrom[]>> {
  const { rows } = await tx.raw<{ rows: (TariffFrom & { siteRef: string })[] }>(
    `select site.ref as "siteRef", t.from_on::text as from, t.price_kwh::float8 as "priceKWh"
     from tariff t join site on site.id = t.site_id
     where site.ref = any (:siteRefs::uuid[]) and ${SITE_VISIBLE} order by t.from_on desc`,
    { siteRefs: [...siteRefs] },
  );
  return groupedBy(rows, (row) => row.siteRef);
}

/** @returns false where a price from that day is there already */
export async function addTariff(
  tx: Tx,
  tariff: { siteId: number; from: string; priceKWh: number; personId: number },
): Promise<boolean> {
  const { rows } = await tx.raw<{ rows: unknown[] }>(
    `insert into tariff (site_id, from_on, price_kwh, created_by) values (:siteId, :from, :priceKWh, :personId)
     on conflict (site_id, from_on) do nothing returning id`,
    tariff,
  );
  return rows.length > 0;
}

export async function removeTariff(
  tx: Tx,
  siteId: number,
  ref: string,
): Promise<{ from: string; priceKWh: number } | undefined> {
  const { rows } = await tx.raw<{ rows: { from: string; priceKWh: number }[] }>(
    `delete from tariff where site_id = :siteId and ref = :ref returning from_on::text as from, price_kwh::float8 as "priceKWh"`,
    { siteId, ref },
  );
  return rows[0];
}

/** Energy of each day priced at its own price, by site; Wh and money. */
export async function fleetWorth(
  tx: Tx,
  siteIds: readonly number[],
  span: { from: string; before: string },
): Promise<Map<number, { money: number; unpriced: number }>> {
  const { rows } = await tx.raw<{ rows: { siteId: number; money: number; unpriced: number }[] }>(
    `select d.site_id as "siteId", sum(d.energy_ac / 1000.0 * p.price_kwh)::float8 as money,
            coalesce(sum(d.energy_ac) filter (where p.price_kwh is null), 0)::float8 as unpriced
     from site_day d left join lateral (
       select t.price_kwh from tariff t where t.site_id = d.site_id and t.from_on <= d.day order by t.from_on desc limit 1) p on true
     where d.site_id = any (:siteIds) and d.day >= cast(:from as date) and d.day < cast(:before as date)
     group by d.site_id having count(p.price_kwh) > 0`,
    { siteIds: [...siteIds], ...span },
  );
  return new Map(rows.map(({ siteId, ...worth }) => [siteId, worth]));
}

/** Months of a site that have a day on record, newest first, as 2026-11. */
export async function monthsWithDays(tx: Tx, siteId: number, most: number): Promise<string[]> {
  const { rows } = await tx.raw<{ rows: { month: string }[] }>(
    `select distinct to_char(day, 'YYYY-MM') as month from site_day where site_id = :siteId order by 1 desc limit :most`,
    { siteId, most },
  );
  return rows.map((r) => r.month);
}
