import { lossStepLabels } from '../../words/domain-losses';
import { yearBefore } from './period';

/** Yields and ratios of any span from sums of its days, by IEC 61724-1 as `yields` has them from records. */

/** One local day of one site, or several days summed. Energies Wh, insolation Wh/m²; null: the day has no sensor in the plane, or is older. */
export interface DaySums {
  /** The site's calendar day, yyyy-mm-dd; of several, the first. */
  day: string;
  /** How many days it stands for; then `nameplate` is their mean, and insolation is weighted by nameplate. */
  days: number;
  energyAc: number;
  energyDc: number;
  /** W at STC. */
  nameplate: number | null;
  /** 1/K */
  gammaPmp: number | null;
  /** Share of the reports due in daylight that came, 0 … 1; of several days, the sum. */
  complete: number;
  lostMinutes: number;
  lostMinutesGrid: number;
  light: DayLight | null;
}

/** Sums over the quarters of a day that have irradiance and power both. */
export interface DayLight {
  days: number;
  quartersDue: number;
  quartersLit: number;
  insolation: number;
  energyAcLit: number;
  energyDcLit: number;
  /** Of those, with a temperature of the modules. */
  quartersWarm: number;
  insolationWarm: number;
  /** Wh/m² · °C */
  insolationTemperature: number;
  energyAcWarm: number;
  /** Minutes with enough light to run by, reported. */
  minutesLit: number;
  limitedMinutes: number;
  /** Nameplate by the light of the lost minutes. */
  lostEnergy: number;
  lostEnergyGrid: number;
}

export interface Figures {
  /** Days with any production record. */
  days: number;
  energyKWh: number;
  energyDcKWh: number;
  /** kWh/kWp over days with a known nameplate; null: none. */
  specificYieldKWhKWp: number | null;
  /** kWh/m² in the plane over the quarters with power, weighted by nameplate where that changed. */
  insolationKWhM2: number | null;
  referenceYieldH: number | null;
  arrayYieldH: number | null;
  finalYieldH: number | null;
  performanceRatio: number | null;
  /** Denominator at 25 °C. */
  performanceRatioStc: number | null;
  /** Denominator at the irradiance-weighted temperature of a longer period. */
  performanceRatioAnnual: number | null;
  /** °C */
  irradianceWeightedTemperature: number | null;
  /** Share of the reported minutes of daylight in which the plant ran. */
  availability: number | null;
  /** The same, minutes without grid left out. */
  availabilityOwn: number | null;
  lostMinutes: number;
  lostMinutesGrid: number;
  limitedMinutes: number;
  /** Mean share of daylight reports that came, over the days asked for; a day without a record counts as none. */
  completeness: number;
  /** Days with light, over the days asked for. */
  completenessLight: number;
  completenessTemperature: number;
}

const sum = <T>(items: readonly T[], of: (item: T) => number): number =>
  items.reduce((total, item) => total + of(item), 0);
const over = (above: number, below: number): number | null => (below > 0 ? above / below : null);

/**
 * Figures of a span. Every ratio counts only quarters that have all that it needs, so that a gap of the light never
 * makes a plant look good; `nameplate` may differ from day to day.
 *
 * @param days each day at most once; others of the span count as missing
 * @param asked number of days of the span, ≥ `days.length`, ≥ 1
 * @param temperatureModuleAnnual °C; without it the ratio at annual temperature is null
 * @throws RangeError when fewer days were asked for than are given
 */
export function figuresOf(
  days: readonly DaySums[],
  asked: number,
  temperatureModuleAnnual?: number | null,
): Figures {
  const there = sum(days, (d) => d.days);
  if (!(asked >= Math.max(1, there)))
    throw new RangeError(`asked must be at least the number of days, ${there}, but is ${asked}`);
  const named = days.filter((d) => d.nameplate !== null && d.nameplate > 0);
  const lit = days.flatMap((d) =>
    d.light && d.nameplate !== null && d.nameplate > 0
      ? [{ ...d.light, p0: d.nameplate, gamma: d.gammaPmp ?? 0 }]
      : [],
  );
  const p0Days = sum(named, (d) => (d.nameplate ?? 0) * d.days);
  const litDays = sum(lit, (d) => d.days);
  const reference = sum(lit, (d) => (d.p0 * d.insolation) / 1000); // Wh at STC
  const p0Mean = litDays > 0 ? sum(lit, (d) => d.p0 * d.days) / litDays : 0;
  const warm = sum(lit, (d) => (d.p0 * d.insolationWarm) / 1000);
  const at = (temperature: number): number =>
    sum(
      lit,
      (d) =>
        (d.p0 * (d.insolationWarm + d.gamma * (d.insolationTemperature - temperature * d.insolationWarm))) /
        1000,
    );
  const energyWarm = sum(lit, (d) => d.energyAcWarm);
  const minutesLit = sum(lit, (d) => d.minutesLit);
  const lostMinutes = sum(days, (d) => d.lostMinutes);
  const lostMinutesGrid = sum(days, (d) => d.lostMinutesGrid);
  const hours = (energy: number): number | null => (p0Mean > 0 ? energy / p0Mean : null);
  const due = sum(lit, (d) => d.quartersDue);
  const dueShare = litDays / asked;
  return {
    days: there,
    energyKWh: sum(days, (d) => d.energyAc) / 1000,
    energyDcKWh: sum(days, (d) => d.energyDc) / 1000,
    specificYieldKWhKWp: over(sum(named, (d) => d.energyAc) * sum(named, (d) => d.days), p0Days),
    insolationKWhM2: litDays > 0 ? reference / p0Mean : null,
    referenceYieldH: hours(reference),
    arrayYieldH: hours(sum(lit, (d) => d.energyDcLit)),
    finalYieldH: hours(sum(lit, (d) => d.energyAcLit)),
    performanceRatio: over(
      sum(lit, (d) => d.energyAcLit),
      reference,
    ),
    performanceRatioStc: warm > 0 ? over(energyWarm, at(25)) : null,
    performanceRatioAnnual:
      warm > 0 && temperatureModuleAnnual !== undefined && temperatureModuleAnnual !== null
        ? over(energyWarm, at(temperatureModuleAnnual))
        : null,
    irradianceWeightedTemperature: over(
      sum(lit, (d) => d.insolationTemperature),
      sum(lit, (d) => d.insolationWarm),
    ),
    availability: minutesLit > 0 ? Math.max(0, 1 - lostMinutes / minutesLit) : null,
    availabilityOwn:
      minutesLit > 0 && minutesLit > lostMinutesGrid
        ? Math.max(0, 1 - (lostMinutes - lostMinutesGrid) / (minutesLit - lostMinutesGrid))
        : null,
    lostMinutes,
    lostMinutesGrid,
    limitedMinutes: sum(lit, (d) => d.limitedMinutes),
    completeness: sum(days, (d) => d.complete) / asked,
    completenessLight: due > 0 ? (sum(lit, (d) => d.quartersLit) / due) * dueShare : 0,
    completenessTemperature: due > 0 ? (sum(lit, (d) => d.quartersWarm) / due) * dueShare : 0,
  };
}

/** A loss that something names, kWh: units and strings (from causes). */
export interface NamedLoss {
  label: string;
  kWh: number;
}
export interface LossStep {
  key: 'light' | 'temperature' | 'grid' | 'stopped' | 'named' | 'rest' | 'made';
  label: string;
  /** kWh: `light` and `made` are totals, the others are taken away (or, negative, added). */
  kWh: number;
}

/**
 * From what the light at STC would have given to what went out, over the quarters with both. Named losses are
 * estimates of causes; the rest is what nothing names: soiling, shade, wiring, mismatch, conversion.
 * @returns null without light
 */
export function lossSteps(days: readonly DaySums[], named: readonly NamedLoss[]): LossStep[] | null {
  const lit = days.flatMap((d) =>
    d.light && d.nameplate ? [{ ...d.light, p0: d.nameplate, gamma: d.gammaPmp ?? 0 }] : [],
  );
  const light = sum(lit, (d) => (d.p0 * d.insolation) / 1000) / 1000;
  if (!(light > 0)) return null;
  const temperature =
    -sum(lit, (d) => (d.p0 * d.gamma * (d.insolationTemperature - 25 * d.insolationWarm)) / 1000) / 1000;
  const grid = sum(lit, (d) => d.lostEnergyGrid) / 1000;
  const stopped = sum(lit, (d) => d.lostEnergy - d.lostEnergyGrid) / 1000;
  const made = sum(lit, (d) => d.energyAcLit) / 1000;
  const causes = named.filter((n) => n.kWh > 0);
  const rest = light - temperature - grid - stopped - sum(causes, (n) => n.kWh) - made;
  return [
    { key: 'light', label: lossStepLabels.light, kWh: light },
    {
      key: 'temperature',
      label: temperature >= 0 ? lossStepLabels.warm : lossStepLabels.cold,
      kWh: temperature,
    },
    { key: 'grid', label: lossStepLabels.grid, kWh: grid },
    { key: 'stopped', label: lossStepLabels.stopped, kWh: stopped },
    ...causes.map((n): LossStep => ({ key: 'named', label: n.label, kWh: n.kWh })),
    { key: 'rest', label: lossStepLabels.rest, kWh: rest },
    { key: 'made', label: lossStepLabels.made, kWh: made },
  ];
}

/** Energy of the days that both years have, Wh: a day without data is held against nothing. */
export function sameDays(
  now: readonly Pick<DaySums, 'day' | 'energyAc'>[],
  before: readonly Pick<DaySums, 'day' | 'energyAc'>[],
): { now: number; before: number; days: number } {
  const then = new Map(before.map((d) => [d.day, d.energyAc]));
  const sum = { now: 0, before: 0, days: 0 };
  for (const { day, energyAc } of now) {
    const earlier = then.get(yearBefore(day));
    if (earlier === undefined) continue;
    sum.now += energyAc;
    sum.before += earlier;
    sum.days += 1;
  }
  return sum;
}
