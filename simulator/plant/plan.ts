import type { ModuleType } from '../../src/domain/equipment/module-type';
import type { UnitKind, UnitType } from '../../src/domain/equipment/unit-type';
import type { Fault } from '../faults/kinds';

/**
 * A plant on paper: what the seed writes into the database and what the simulator builds and runs. Things are
 * known by their names within a site, types by their names within an organisation.
 */
export interface FleetPlan {
  /** All chance in the plant and its weather comes from it. */
  seed: number;
  /** Epoch seconds of the moment for which the fleet was laid out. */
  since: number;
  organisations: OrganisationPlan[];
}

export interface OrganisationPlan {
  name: string;
  timeZone: string;
  phone: string;
  people: PersonPlan[];
  moduleTypes: ModuleType[];
  unitTypes: UnitType[];
  sites: SitePlan[];
}

export interface PersonPlan {
  email: string;
  name: string;
  role: 'manager' | 'technician' | 'analyst' | 'customer';
  /** Names of the sites a customer may see. */
  sites: string[];
}

export interface SitePlan {
  /** For addresses of the simulator's own page; unique in the fleet. */
  key: string;
  name: string;
  place: string;
  latitude: number;
  longitude: number;
  /** m */
  altitude: number;
  timeZone: string;
  stage: 'commissioning' | 'operating';
  ruleSet: 'rapid_shutdown_30s' | 'rapid_shutdown_10s' | 'hazard_control' | 'none';
  /** Absent: another building than a dwelling. */
  structure?: 'one_or_two_family_dwelling' | 'other_building' | 'not_on_building';
  /** °C, for design checks: coldest expected and hottest air; absent: not entered. */
  temperatureMin?: number;
  temperatureMax?: number;
  /** Local date; null while commissioning. */
  switchedOnOn: string | null;
  shutdownSwitchPlace: string;
  contactName: string;
  contactPhone: string;
  /** Roof outline, m. */
  outline: [number, number][];
  reportIntervalS: number;
  planes: PlanePlan[];
  inverters: InverterPlan[];
  initiators: { name: string; place: string }[];
  zones: { name: string; initiator: string }[];
  transmitters: { name: string; zone: string }[];
  loggers: LoggerPlan[];
  strings: StringPlan[];
  climate: ClimatePlan;
  /** Things that stand on or beside the roof and throw shade. */
  obstacles: ObstaclePlan[];
  /** Units that answer a roll call and are on no drawing. */
  strangers: StrangerPlan[];
  /** Faults that are there from the start; `sinceS` seconds before the fleet's `since`. */
  faults: PresetFault[];
  /** Initiators that stand open from the start, for so many seconds before the fleet's `since`. */
  openInitiators: { initiator: string; sinceS: number; by: string }[];
}

export interface PlanePlan {
  name: string;
  surfaceTilt: number;
  surfaceAzimuth: number;
  albedo: number;
}

export interface InverterPlan {
  name: string;
  /** W */
  acPowerMax: number;
  inputs: number[];
  /** Name of its type in the catalogue; absent: not entered. */
  type?: string;
}

export interface LoggerPlan {
  serial: string;
  firmware: string;
  gateways: { number: number; name: string }[];
  sensors: { number: number; kind: 'poa_global' | 'ghi' | 'ambient'; plane: string | null }[];
}

export interface StringPlan {
  name: string;
  plane: string;
  inverter: string;
  input: number;
  zone: string;
  logger: string;
  /** The string's place in its logger's roster. */
  rosterIndex: number;
  unitType: string;
  kind: UnitKind;
  homeRunLeavesArray: boolean;
  /** Ohm: home run and leads, as drawn. */
  cableResistance: number;
  /** Transmitters that are meant to serve it. */
  transmitters: string[];
  /** In order of position; index 0 is position 1, at the negative end. */
  slots: SlotPlan[];
}

export interface SlotPlan {
  /** null: no unit there. */
  serial: string | null;
  moduleType: string;
  /** m, in the coordinates of the outline. */
  roofX: number;
  roofY: number;
  roofPlace: string;
  /** Number of the gateway that hears the unit best. */
  gateway: number;
}

export interface StrangerPlan {
  serial: string;
  logger: string;
  gateway: number;
  /** Where it really sits: the serial that the drawing has there is nowhere. Absent: on no slot of the site. */
  seat?: { string: string; position: number };
}

/** What the weather of a place is like; the simulator makes the days from it. */
export interface ClimatePlan {
  /** Share of days with few, some and much cloud; the rest. */
  clearShare: number;
  cloudyShare: number;
  /** °C, mean over the year and half-swings by season and by day. */
  temperatureMean: number;
  temperatureSeason: number;
  temperatureDay: number;
  /** m/s, mean. */
  windMean: number;
  /** Loss of light per dry day (0.001 = 0.1 %), washed off by rain. */
  soilingPerDay: number;
  /** The day on which the fleet was laid out is a fair one. */
  fairToday: boolean;
}

export interface ObstaclePlan {
  name: string;
  /** m, in the coordinates of the outline. */
  x: number;
  y: number;
  /** m, above the modules. */
  height: number;
  /** m */
  radius: number;
}

export interface PresetFault {
  fault: Fault;
  sinceS: number;
  /** Seconds before the fleet's `since` at which it ended; absent: it has not. */
  untilS?: number;
}

/** Units of a site, empty slots left out. */
export const unitsOf = (site: SitePlan): number =>
  site.strings.reduce((n, s) => n + s.slots.filter((slot) => slot.serial !== null).length, 0);

/** The equipment of an organisation by name; a name that the plan uses and does not define is an error. */
export function typeNamed<T extends { name: string }>(types: readonly T[], name: string): T {
  const found = types.find((t) => t.name === name);
  if (!found) throw new Error(`The plan uses the type "${name}" and does not define it.`);
  return found;
}
