import type { ModuleType } from '../../equipment/module-type';
import type { UnitType } from '../../equipment/unit-type';
import type { Conditions } from '../../readings/reading';
import type { ReadingAround, TakenReading } from './judge-reading';
import type { ReadingKind } from './stages';

/** Readings that belong together: the same stage and light, close in time. */

export type KeptReading = Omit<TakenReading, 'meterMode'> & { finding?: { outcome: string } | null };
export interface ReadString {
  id: string;
  name: string;
  units: number;
  unitTypeId: string;
  moduleTypeId: string;
  heard: number;
  /** Newest of each stage and kind. */
  readings: readonly KeptReading[];
}
export interface ReadSite {
  unitTypes: readonly (Pick<UnitType, 'kind' | 'outOfBox' | 'shutdownVoltage'> & { id: string })[];
  moduleTypes: readonly (ModuleType & { id: string })[];
  strings: readonly ReadString[];
}

/** Light changes: readings further apart than this say nothing about each other, s. From experience. */
export const SAME_LIGHT_S = 1800;
/** More than this many neighbours pin no better. */
const SIBLINGS_MOST = 6;

const seconds = (at: string): number => Date.parse(at) / 1000;
const answered = (s: Pick<ReadString, 'heard' | 'units'>): string =>
  s.heard >= s.units ? 'all' : s.heard === 0 ? 'none' : `${s.heard} of ${s.units}`;
const together = (a: Pick<TakenReading, 'stage' | 'light' | 'at'>, b: KeptReading): boolean =>
  a.stage === b.stage && a.light === b.light && Math.abs(seconds(a.at) - seconds(b.at)) <= SAME_LIGHT_S;

/**
 * What stands around a reading of a string: readings of other strings of its types under the same light, and the
 * string's own other readings. `conditions`: what a sensor had at that time.
 * @throws RangeError when the site does not hold the string or its types
 */
export function readingAround(
  sheet: ReadSite,
  stringId: string,
  reading: Pick<TakenReading, 'stage' | 'light' | 'at' | 'kind'>,
  conditions: Conditions | null = null,
): ReadingAround {
  const string = sheet.strings.find((s) => s.id === stringId);
  const unitType = sheet.unitTypes.find((t) => t.id === string?.unitTypeId);
  const module = sheet.moduleTypes.find((t) => t.id === string?.moduleTypeId);
  if (!string || !unitType || !module)
    throw new RangeError(`string ${stringId}: not on this sheet, or its types`);
  const own = (kind: ReadingKind): number | null =>
    string.readings.find((r) => r.kind === kind && r.kind !== reading.kind && together(reading, r))
      ?.voltage ?? null;
  const siblings = sheet.strings
    .filter(
      (s) =>
        s.id !== string.id &&
        s.unitTypeId === string.unitTypeId &&
        s.moduleTypeId === string.moduleTypeId &&
        // a roll call that has reached one and not the other leaves them in different states
        (unitType.kind === 'shutdown_only' || answered(s) === answered(string)),
    )
    .flatMap((s) =>
      s.readings
        .filter((r) => r.kind === 'positive_to_negative' && together(reading, r))
        .map((r) => ({
          name: s.name,
          units: s.units,
          voltageV: r.voltage,
          apartS: Math.abs(seconds(r.at) - seconds(reading.at)),
        })),
    )
    .sort((a, b) => a.apartS - b.apartS)
    .slice(0, SIBLINGS_MOST);
  return {
    units: string.units,
    unitType,
    module,
    heard: string.heard,
    conditions,
    siblings: siblings.map(({ name, units, voltageV }) => ({ name, units, voltageV })),
    own: {
      between: own('positive_to_negative'),
      positive: own('positive_to_earth'),
      negative: own('negative_to_earth'),
    },
  };
}
