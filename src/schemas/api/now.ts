import { z } from 'zod';
import {
  COMMANDS,
  EVENT_KINDS,
  INVERTER_STATUSES,
  STRING_FINDINGS,
  UNIT_STATES,
  VERDICTS,
} from '../../domain/verdicts/codes';
import { UNIT_KINDS } from '../../domain/equipment/unit-type';

/** What holds at this moment: the shapes that pages, the API and /live share. SI units; times ISO 8601 in UTC. */

const time = z.iso.datetime();
/** Public identifiers are UUIDs; the database's own numbers never leave it. */
export const id = z.uuid();

export const counts = z.object({
  units: z.int(),
  passing: z.int(),
  shutdown: z.int(),
  unheard: z.int(),
  silent: z.int(),
  dark: z.int(),
  stuck: z.int(),
  notShuttingDown: z.int(),
  unconfirmed: z.int(),
});
export type Counts = z.infer<typeof counts>;

export const commandNow = z.object({
  /** Zone or transmitter by name. */
  where: z.string(),
  whereKind: z.enum(['zone', 'transmitter']),
  inForce: z.enum(COMMANDS),
  since: time,
  by: z.string(),
});
export type CommandNow = z.infer<typeof commandNow>;

export const slotNow = z.object({
  position: z.int(),
  serial: z.string().nullable(), // null: no unit in the slot
  roofPlace: z.string(),
  state: z.enum(UNIT_STATES).nullable(), // null: nothing to say of it (no unit, or shutdown-only)
  verdict: z.enum(VERDICTS).nullable(),
  since: time.nullable(),
  seen: time.nullable(), // newest value of this unit
  voltage: z.number().nullable(), // V, output; where the type measures its input only, null
  voltageIn: z.number().nullable(), // V, module side
  current: z.number().nullable(), // A
  power: z.number().nullable(), // W
  temperature: z.number().nullable(), // °C
  signal: z.number().nullable(), // dBm
  gateway: z.string().nullable(),
  /** The output voltage is inferred from the unit's claim, not measured: drawn dashed. */
  assumed: z.boolean(),
  /** V that this unit should give now if it were passing. */
  expected: z.number().nullable(),
});
export type SlotNow = z.infer<typeof slotNow>;

export const stringNow = z.object({
  id,
  name: z.string(),
  kind: z.enum(UNIT_KINDS),
  at: time.nullable(), // newest frame; null: none yet
  slots: z.array(slotNow),
  counts,
  voltage: z.number().nullable(), // V over the string, by its units or its input
  current: z.number().nullable(), // A
  power: z.number().nullable(), // W
  expectedVoltage: z.number().nullable(),
  expectedBand: z.tuple([z.number(), z.number()]).nullable(), // V, where the expectation lies 9 times in 10
  /** V open circuit with every unit in shutdown, by the type entered, while shutdown is in force; else null. */
  expectedInShutdown: z.number().nullable(),
  expectedFrom: z.string(), // in words: "other strings on the south roof", "clear-sky model"
  /** How many other strings the expectation rests on; 0: it comes from elsewhere. */
  expectedStrings: z.int(),
  command: commandNow.nullable(),
  dark: z.boolean(), // too little light to power the units
  input: z.object({
    inverter: z.string(),
    number: z.int(),
    voltage: z.number().nullable(),
    current: z.number().nullable(),
    strings: z.int(), // how many share it
  }),
  finding: z.object({ kind: z.enum(STRING_FINDINGS), since: time, words: z.string() }).nullable(),
});
export type StringNow = z.infer<typeof stringNow>;

export const inverterNow = z.object({
  name: z.string(),
  at: time.nullable(),
  acPower: z.number().nullable(), // W
  acPowerMax: z.number(),
  status: z.enum(INVERTER_STATUSES).nullable(),
  powerLimit: z.number().nullable(), // W
  insulation: z.number().nullable(), // kohm
  arcFlag: z.boolean(),
  earthFaultFlag: z.boolean(),
  inputs: z.array(
    z.object({
      number: z.int(),
      voltage: z.number().nullable(),
      current: z.number().nullable(),
      strings: z.array(z.string()),
    }),
  ),
});
export type InverterNow = z.infer<typeof inverterNow>;

export const gatewayNow = z.object({
  name: z.string(),
  number: z.int(),
  lastHeardAt: time.nullable(),
  units: z.int(), // whose newest report came by it
  silent: z.boolean(),
});
export type GatewayNow = z.infer<typeof gatewayNow>;

export const eventItem = z.object({
  id: z.string(),
  at: time,
  recordedAt: time,
  siteId: id,
  siteName: z.string(),
  stringId: id.nullable(),
  stringName: z.string().nullable(),
  kind: z.enum(EVENT_KINDS),
  detail: z.record(z.string(), z.unknown()),
});
export type EventItem = z.infer<typeof eventItem>;

/** What inverters gave when they were last heard, where that is too long ago to be of now. */
export const madeLast = z.object({ power: z.number(), at: time }).nullable(); // W, AC

/** A site's line in lists, and what /live sends when something at the site changes. */
export const siteNow = z.object({
  id,
  name: z.string(),
  place: z.string(),
  timeZone: z.string(),
  stage: z.enum(['commissioning', 'operating']),
  counts,
  strings: z.int(),
  power: z.number().nullable(), // W, AC, sum of inverters; null: nothing is known of now
  madeLast, // null: `power` is of now, or nothing was ever reported
  acPowerMax: z.number(), // W
  reportedAt: time.nullable(), // newest frame of the site
  daylight: z.boolean(), // sun above the horizon there
  inShutdownSince: time.nullable(), // every zone in shutdown on purpose
  commands: z.array(commandNow), // what is in force other than released
  silentGateways: z.int(),
  loggerConnected: z.boolean(),
  performanceRatio30d: z.number().nullable(), // 0 … 1
});
export type SiteNow = z.infer<typeof siteNow>;

/** Units of one state of affairs that a shared part explains. */
export const causeNow = z.object({
  key: z.string(), // stable while it lasts
  verdict: z.enum(['not_shutting_down', 'stuck', 'silent', 'unconfirmed']),
  siteId: id,
  siteName: z.string(),
  since: time,
  sharedPart: z
    .object({
      kind: z.enum([
        'unit',
        'string',
        'transmitter',
        'gateway',
        'input',
        'inverter',
        'logger',
        'zone',
        'site',
      ]),
      name: z.string(),
    })
    .nullable(),
  headline: z.string(), // "One transmitter is not heard by 20 units"
  evidence: z.string(),
  alternatives: z.array(z.string()),
  confidence: z.number(), // 0 … 1
  units: z.array(
    z.object({
      stringId: id,
      stringName: z.string(),
      position: z.int().nullable(),
      serial: z.string().nullable(),
      since: time,
    }),
  ),
  lossWhPerDay: z.number().nullable(),
});
export type CauseNow = z.infer<typeof causeNow>;
