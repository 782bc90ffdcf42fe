import { z } from 'zod';
import { UNIT_KINDS } from '../../domain/equipment/unit-type';
import { signOff, checkRecord } from './checks';
import { id } from './now';
import { readingRecord } from './readings';

/**
 * What a phone keeps of a site to work without a network; the desk's pages read the same. Types stand once and are
 * pointed at by their public identifiers. SI units; times ISO 8601 in UTC.
 */

const time = z.iso.datetime();

export const unitTypeSheet = z.object({
  id,
  name: z.string(),
  kind: z.enum(UNIT_KINDS),
  outOfBox: z.enum(['shutdown', 'passing']),
  releasedBy: z.enum(['keep_alive', 'logger']),
  onCommandLoss: z.enum(['shuts_down', 'holds']),
  commandLossAfterS: z.number(),
  shutdownVoltage: z.object({ nominal: z.number(), min: z.number(), max: z.number() }),
  bypassVoltage: z.number(),
  measures: z.enum(['none', 'input', 'output', 'both']),
  voltageAccuracy: z.number(),
  currentAccuracy: z.number(),
  voltageInMax: z.number(),
  currentMax: z.number(),
  insulationTestMax: z.number().nullable(), // V; null: the maker allows none
  facesAllowed: z.enum(['either', 'label_out']),
  connectorIn: id.nullable(), // towards the module
  connectorOut: id.nullable(), // towards the neighbours
});
export const moduleTypeSheet = z.object({
  id,
  name: z.string(),
  vocRef: z.number(),
  iscRef: z.number(),
  vmpRef: z.number(),
  impRef: z.number(),
  betaVoc: z.number(),
  alphaIsc: z.number(),
  gammaPmp: z.number(),
  cellsInSeries: z.number(),
  bypassGroups: z.number(),
  noct: z.number(),
  connector: id.nullable(),
});

export const captureString = z.object({
  id,
  name: z.string(),
  units: z.int(), // slots
  serials: z.array(z.string().nullable()), // by position, 1 first, at the negative end; null: no unit in the slot
  unitTypeId: id,
  moduleTypeId: id, // the commonest of its slots
  plane: z.string(),
  zone: z.string(),
  input: z.object({ inverter: z.string(), number: z.int(), strings: z.int() }),
  /** What is in force where its units listen, as last heard; nobody has said: unknown. */
  commanded: z.enum(['released', 'shutdown', 'unknown']),
  heard: z.int(), // units that have answered the roll call
  /** Newest of each check; nothing: not recorded. */
  checks: z.array(checkRecord.omit({ stringId: true })),
  /** Fingerprint of these checks: what a sign-off signs. */
  fingerprint: z.string(),
  /** Newest of each stage and kind. */
  readings: z.array(readingRecord.omit({ stringId: true })),
  signOff: signOff.omit({ stringId: true }).nullable(),
});
export type CaptureString = z.infer<typeof captureString>;

export const captureSnapshot = z.object({
  at: time, // the server's clock
  person: z.object({ id, name: z.string(), role: z.string() }),
  site: z.object({
    id,
    name: z.string(),
    place: z.string(),
    timeZone: z.string(),
    stage: z.enum(['commissioning', 'operating']),
    ruleSet: z.enum(['rapid_shutdown_30s', 'rapid_shutdown_10s', 'hazard_control', 'none']),
  }),
  unitTypes: z.array(unitTypeSheet),
  moduleTypes: z.array(moduleTypeSheet),
  connectors: z.array(
    z.object({ id, name: z.string(), maker: z.string(), family: z.string(), archived: z.boolean() }),
  ),
  pairs: z.array(z.object({ first: id, second: id, evidence: z.string() })),
  strings: z.array(captureString), // by name
  limits: z.object({ photoMaxBytes: z.int() }),
});
export type CaptureSnapshot = z.infer<typeof captureSnapshot>;
