import type { Knex } from 'knex';
import { mix, uniform } from '../../simulator/chance';
import { arrayField, copyMade, instant } from '../history/copy';
import { QUARTER_S } from '../history/quarters';
import { STRINGS_A_SITE, UNITS_A_STRING } from './plant';
import type { Seat } from './readings';
import { lightAt, type LoadShape } from '../../simulator/load/frames';

const DAY_S = 86_400;
const LOOKS = 32;
const UNIT_WP = 430;

export const dayText = (atS: number): string => new Date(atS * 1000).toISOString().slice(0, 10);

/** A string that has made less than the others for some days. */
export const isWeak = (seat: Seat): boolean => uniform(seat.load.key, 21) < 0.02;
const WEAK_DAYS = 12;

/** Hours at full sun of a day: the season and that day's weather. */
const hoursOf = (atS: number): number =>
  (3.6 + 2 * Math.cos(((atS / DAY_S) % 365.25) * ((2 * Math.PI) / 365.25) - 2.96)) *
  (0.35 + 0.65 * uniform(7, Math.floor(atS / DAY_S)));

/** A row a string and day for so many days up to yesterday, where the site is. */
export function writeStringDays(
  tx: Knex.Transaction,
  seats: readonly Seat[],
  localTodayS: number,
  days: number,
): Promise<number> {
  const columns = [
    'string_id',
    'site_id',
    'day',
    'frames',
    'voltage_avg',
    'voltage_max',
    'energy',
    'unit_energy',
  ];
  const rest = (atS: number, look: number, weak: boolean): string => {
    const unit = UNIT_WP * hoursOf(atS) * (0.93 + look / (LOOKS * 40)) * (weak ? 0.86 : 1);
    const units = Array.from({ length: UNITS_A_STRING }, (_, i) =>
      Math.round(unit * (0.985 + 0.03 * uniform(look * 64 + i, Math.floor(atS / DAY_S)))),
    );
    const energy = units.reduce((a, b) => a + b, 0);
    return `${dayText(atS)}\t700\t63300\t66000\t${energy}\t${arrayField(units)}`;
  };
  function* rows(): Generator<string> {
    for (let back = days; back >= 1; back--) {
      const atS = localTodayS - back * DAY_S;
      const looks = Array.from({ length: LOOKS }, (_, look) => rest(atS, look, false));
      const weak = back <= WEAK_DAYS ? looks.map((_, look) => rest(atS, look, true)) : looks;
      for (const seat of seats) {
        const look = mix(seat.load.key, 22) % LOOKS;
        yield `${seat.of.id}\t${seat.of.siteId}\t${(isWeak(seat) ? weak : looks)[look]}`;
      }
    }
  }
  return copyMade(tx, 'string_day', columns, rows());
}

/** A row a site and day, and a row a site and quarter for the last month. */
export async function writeSiteRollUps(
  tx: Knex.Transaction,
  siteIds: readonly number[],
  shape: LoadShape,
  localTodayS: number,
  days: number,
): Promise<number> {
  const nameplate = STRINGS_A_SITE * UNITS_A_STRING * UNIT_WP;
  const columns = `site_id, day, energy_ac, energy_dc, energy_expected, lost_minutes, lost_minutes_grid, complete, nameplate,
    gamma_pmp, quarters_due, quarters_lit, insolation, energy_ac_lit, energy_dc_lit, quarters_warm, insolation_warm,
    insolation_temperature, energy_ac_warm, minutes_lit, limited_minutes, lost_energy, lost_energy_grid`;
  function* dayRows(): Generator<string> {
    for (let back = days; back >= 1; back--) {
      const atS = localTodayS - back * DAY_S;
      const hours = hoursOf(atS);
      const rest = Array.from({ length: LOOKS }, (_, look) => {
        const dc = Math.round(nameplate * hours * (0.93 + look / (LOOKS * 40)));
        const ac = Math.round(dc * 0.968);
        const light = Math.round(hours * 1000);
        return [
          ...[
            dayText(atS),
            ac,
            dc,
            Math.round(nameplate * hours * 0.955),
            0,
            0,
            1,
            nameplate,
            -0.003,
            96,
            44,
            light,
          ],
          ...[ac, dc, 44, light, light * 38, ac, 600, 0, 0, 0],
        ].join('\t');
      });
      for (const id of siteIds) yield `${id}\t${rest[mix(id, 23) % LOOKS]}`;
    }
  }
  const untilS = localTodayS + DAY_S / 2;
  function* quarterRows(): Generator<string> {
    for (let atS = localTodayS - 30 * DAY_S; atS < untilS; atS += QUARTER_S) {
      const light = lightAt(shape, atS);
      if (light <= 0.02) continue;
      for (const id of siteIds)
        yield `${instant(atS)}\t${id}\t${Math.round(38_000 * light)}\t${Math.round(240 * light)}`;
    }
  }
  const quarters = ['at', 'site_id', 'ac_power', 'poa_insolation'];
  return (
    (await copyMade(tx, 'site_day', columns.split(/,\s*/), dayRows())) +
    (await copyMade(tx, 'site_quarter', quarters, quarterRows()))
  );
}
