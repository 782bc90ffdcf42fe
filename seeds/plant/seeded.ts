import type { SitePlan } from '../../simulator/plant/plan';

/** The database's numbers and public references of what was written, by the plan's names. */
export interface SeededSite {
  id: number;
  ref: string;
  organisationId: number;
  plan: SitePlan;
  strings: Map<string, { id: number; ref: string }>;
  loggers: Map<string, number>;
  zones: Map<string, number>;
  transmitters: Map<string, number>;
  inverters: Map<string, number>;
  /** By `inverter/number`. */
  inputs: Map<string, number>;
  /** By `logger/number`. */
  sensors: Map<string, number>;
  units: Map<string, number>;
}
export interface SeededPlant {
  organisations: Map<string, { id: number; ref: string }>;
  /** By e-mail address. */
  people: Map<string, { id: number; ref: string }>;
  /** By site name. */
  sites: Map<string, SeededSite>;
}
export interface SeedOptions {
  /** From which the loggers' tokens are made; the simulator needs the same. */
  secret: string;
  /** Everybody's password; absent: people are written who can't sign in by password. */
  password?: string;
}
