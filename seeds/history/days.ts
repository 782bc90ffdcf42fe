import type { FleetPlan, OrganisationPlan, StringPlan } from '../../simulator/plant/plan';
import { typeNamed } from '../../simulator/plant/plan';
import { planeLight } from '../../simulator/weather/plane-light';
import { Sky } from '../../simulator/weather/sky';
import { known } from '../plant/rows';
import { arrayField } from './copy';
import type { Lines, SiteHistory } from './site-history';
import { localDays } from './quarters';

/** Two years and a month: years can be compared. */
export const DAYS = 760;
const DAY_S = 86_400;
/** Minutes with light to run by on a day that was not run in full. */
const LIT_MINUTES = 600;
/** What wiring, mismatch, heat in the inverter and conversion leave of the modules' power in a good plant. */
const GOOD_PLANT = 0.955;

/** What the sky of one local day gave one plane. */
interface PlaneDay {
  /** Hours at STC power that the modules could have given, dirt left out. */
  hours: number;
  /** Share of light that dirt let through. */
  kept: number;
  /** °C, weighted by power. */
  cell: number;
  /** Wh/m² in the plane, and that times the cells' °C. */
  insolation: number;
  warmth: number;
}

/**
 * Days of months ago for which no quarters are kept: the same weather, hour by hour, with each string's own yield
 * taken from the month that was run in full.
 */
export function writeDays(
  fleet: FleetPlan,
  organisation: OrganisationPlan,
  history: SiteHistory,
  { stringDays, siteDays }: Pick<Lines, 'stringDays' | 'siteDays'>,
): void {
  const { site } = history;
  const { plan } = site;
  const localDay = localDays(plan.timeZone);
  const today = localDay(fleet.since);
  const sky = new Sky(plan, fleet.seed, fleet.since);
  const firstS =
    plan.switchedOnOn === null
      ? fleet.since
      : Math.max(fleet.since - DAYS * DAY_S, Date.parse(plan.switchedOnOn) / 1000 + DAY_S);
  const planeDays = new Map<string, Map<string, PlaneDay>>();
  const fromS = Math.min(firstS, fleet.since - 2 * DAY_S);
  for (let atS = Math.floor(fromS / 3600) * 3600; atS < fleet.since; atS += 3600)
    addHour(plan, sky, atS, localDay, planeDays);

  const dcByDay = new Map<string, number>();
  for (const s of plan.strings) {
    const type = typeNamed(organisation.moduleTypes, s.slots[0]?.moduleType ?? '');
    const pmp = (type.vmpRef * type.impRef * s.slots.length) / 1000; // kW
    const rollUp = known(history.rollUps, s.name, 'the string');
    const stringId = history.stringId(s.name);
    // A day that the quarters cover only in part is no measure of a yield.
    const full = new Map([...rollUp.days].filter(([day]) => day !== [...rollUp.days.keys()][0]));
    const yieldOf = ownYield(full, planeDays, s, pmp, today);
    for (const [day, planes] of planeDays) {
      const p = planes.get(s.plane);
      if (!p) continue;
      const measured = full.get(day);
      if (measured) {
        const volts =
          measured.voltageQuarters > 0 ? Math.round(measured.voltageSum / measured.voltageQuarters) : 0;
        stringDays.push(
          line(
            day,
            stringId,
            site.id,
            measured.frames,
            volts,
            measured.voltageMax,
            measured.energy,
            measured.units,
          ),
        );
        dcByDay.set(day, (dcByDay.get(day) ?? 0) + measured.energy);
      } else if (plan.stage === 'operating' && p.hours > 0.01) {
        const energy = pmp * 1000 * p.hours * p.kept * yieldOf;
        const volts =
          type.vmpRef * s.slots.length * (1 + (type.betaVoc * 1.25 - 0.0004) * (p.cell - 25)) * 100;
        stringDays.push(
          line(day, stringId, site.id, 600, Math.round(volts), Math.round(volts * 1.1), energy, null),
        );
        dcByDay.set(day, (dcByDay.get(day) ?? 0) + energy);
      }
    }
  }
  const expectedOf = (planes: Map<string, PlaneDay>) =>
    plan.strings.reduce((sum, s) => {
      const type = typeNamed(organisation.moduleTypes, s.slots[0]?.moduleType ?? '');
      const hours = planes.get(s.plane)?.hours ?? 0;
      return sum + type.vmpRef * type.impRef * s.slots.length * hours * GOOD_PLANT;
    }, 0);
  const nameplates = new Map<string, number>();
  let gammaByNameplate = 0;
  for (const s of plan.strings) {
    const type = typeNamed(organisation.moduleTypes, s.slots[0]?.moduleType ?? '');
    const p0 = type.vmpRef * type.impRef * s.slots.length;
    nameplates.set(s.plane, (nameplates.get(s.plane) ?? 0) + p0);
    gammaByNameplate += type.gammaPmp * p0;
  }
  const nameplate = [...nameplates.values()].reduce((sum, p0) => sum + p0, 0);
  /** Over the planes, by what hangs in each. */
  const mean = (planes: Map<string, PlaneDay>, of: (p: PlaneDay) => number): number =>
    [...planes].reduce((sum, [name, p]) => sum + (of(p) * (nameplates.get(name) ?? 0)) / nameplate, 0);
  const firstFull = [...history.siteRollUp.days.keys()][0];
  for (const [day, planes] of planeDays) {
    const dc = dcByDay.get(day);
    if (dc === undefined) continue;
    const measured = day === firstFull ? undefined : history.siteRollUp.days.get(day);
    const ac = measured?.energyAc ?? dc * 0.968;
    const complete = measured && day === today ? Math.min(1, measured.minutes / 1440) : 1;
    siteDays.push(
      [
        day,
        site.id,
        Math.round(ac),
        Math.round(dc),
        Math.round(expectedOf(planes)),
        measured?.lost ?? 0,
        measured?.lostGrid ?? 0,
        complete.toFixed(3),
        Math.round(nameplate),
        gammaByNameplate / nameplate,
        96,
        Math.round(96 * complete),
        mean(planes, (p) => p.insolation).toFixed(1),
        Math.round(ac),
        Math.round(dc),
        Math.round(96 * complete),
        mean(planes, (p) => p.insolation).toFixed(1),
        mean(planes, (p) => p.warmth).toFixed(1),
        Math.round(ac),
        measured?.lit ?? LIT_MINUTES,
        0,
        Math.round(((measured?.lostLight ?? 0) * nameplate) / 60_000),
        Math.round(((measured?.lostLightGrid ?? 0) * nameplate) / 60_000),
      ].join('\t'),
    );
  }
}

function line(
  day: string,
  stringId: number,
  siteId: number,
  frames: number,
  average: number,
  highest: number,
  energy: number,
  units: Float64Array | null,
): string {
  const unitEnergy = units ? arrayField(Array.from(units, Math.round)) : '\\N';
  return [day, stringId, siteId, frames, average, highest, Math.round(energy), unitEnergy].join('\t');
}

function addHour(
  plan: SiteHistory['site']['plan'],
  sky: Sky,
  atS: number,
  localDay: (atS: number) => string,
  days: Map<string, Map<string, PlaneDay>>,
): void {
  const now = sky.at(atS);
  if (now.elevation < 0) return;
  const day = localDay(atS);
  const planes = days.get(day) ?? new Map<string, PlaneDay>();
  days.set(day, planes);
  const middle = plan.outline[2] ?? [30, 30];
  for (const p of plan.planes) {
    const light = planeLight(now, p);
    const poa = light.beam * sky.beamThrough(now, middle[0] / 2, middle[1] / 2) + light.diffuse;
    const cell = now.temperatureAir + (0.034 * poa) / (1 + 0.09 * Math.max(0, now.windSpeed - 1));
    const hours = (poa / 1000) * (1 - 0.0034 * (cell - 25));
    const sums = planes.get(p.name) ?? {
      hours: 0,
      kept: 1 - sky.soiling(atS),
      cell: 25,
      insolation: 0,
      warmth: 0,
    };
    sums.cell =
      sums.hours + hours > 0 ? (sums.cell * sums.hours + cell * hours) / (sums.hours + hours) : cell;
    sums.hours += hours;
    sums.insolation += poa;
    sums.warmth += poa * cell;
    planes.set(p.name, sums);
  }
}

/** A string's own share of what its modules could give, from the days that were run in full. */
function ownYield(
  measured: ReadonlyMap<string, { energy: number }>,
  days: ReadonlyMap<string, ReadonlyMap<string, PlaneDay>>,
  s: StringPlan,
  pmp: number,
  today: string,
): number {
  let made = 0;
  let possible = 0;
  for (const [day, { energy }] of measured) {
    const p = days.get(day)?.get(s.plane);
    if (!p || day === today) continue;
    made += energy;
    possible += pmp * 1000 * p.hours * p.kept;
  }
  const share = possible > 0 ? made / possible : GOOD_PLANT;
  // A string that was down most of the month was a good one before.
  return share > 0.6 ? share : GOOD_PLANT;
}
