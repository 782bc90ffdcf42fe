import { z } from 'zod';
import { PART_KINDS } from '../../domain/commissioning/as-built/parts';
import { UNIT_KINDS } from '../../domain/equipment/unit-type';
import { id } from './now';
import { asBuiltFields } from '../../words/fields';

/** The as-built of a site: its parts as they stand, edits of them, and units in slots. Times ISO 8601 in UTC. */

const time = z.iso.datetime();
const value = z.union([z.string(), z.number(), z.boolean(), z.null(), z.array(z.string()).readonly()]);
/** A part by field key; src/domain/commissioning/as-built/parts.ts says what each kind has. */
export const partValues = z.record(z.string(), value);
export type PartValues = z.infer<typeof partValues>;

export const slotBuilt = z.object({
  position: z.int(),
  serial: z.string().nullable(),
  moduleType: id,
  roofPlace: z.string(),
  roofX: z.number().nullable(), // m
  roofY: z.number().nullable(), // m
  placedFrom: time.nullable(),
});
export type SlotBuilt = z.infer<typeof slotBuilt>;

export const stringBuilt = z.object({
  id,
  name: z.string(),
  kind: z.enum(UNIT_KINDS),
  unitType: id,
  plane: id,
  input: id,
  zone: id,
  logger: id.nullable(),
  transmitters: z.array(id),
  cableResistance: z.number(), // ohm
  homeRunLeavesArray: z.boolean(),
  slots: z.array(slotBuilt),
});
export type StringBuilt = z.infer<typeof stringBuilt>;

export const asBuilt = z.object({
  at: time,
  site: z.object({
    id,
    stage: z.enum(['commissioning', 'operating']),
    name: z.string(),
    place: z.string(),
    latitude: z.number(),
    longitude: z.number(),
    altitude: z.number(), // m
    timeZone: z.string(),
    ruleSet: z.string(),
    structure: z.string(),
    reportIntervalS: z.int(),
    temperatureMin: z.number().nullable(), // °C
    temperatureMax: z.number().nullable(), // °C
    shutdownSwitchPlace: z.string(),
    contactName: z.string(),
    contactPhone: z.string(),
  }),
  planes: z.array(
    z.object({
      id,
      name: z.string(),
      surfaceTilt: z.number(),
      surfaceAzimuth: z.number(),
      albedo: z.number(),
    }),
  ),
  inverters: z.array(
    z.object({
      id,
      name: z.string(),
      inverterType: id.nullable(),
      acPowerMax: z.number(), // W
      inputs: z.array(z.object({ id, number: z.int() })),
    }),
  ),
  initiators: z.array(z.object({ id, name: z.string(), place: z.string() })),
  zones: z.array(z.object({ id, name: z.string(), initiator: id })),
  transmitters: z.array(z.object({ id, name: z.string(), zone: id, strings: z.array(id) })),
  loggers: z.array(
    z.object({
      id,
      serial: z.string(),
      lastSpokeAt: time.nullable(),
      /** When its token in force was made; null: it has none and cannot report. */
      tokenAt: time.nullable(),
    }),
  ),
  sensors: z.array(z.object({ id, kind: z.string(), logger: id, number: z.int(), plane: id.nullable() })),
  strings: z.array(stringBuilt),
  /** What the organisation's catalogue offers; archived types are there where the site uses them. */
  catalogue: z.object({
    moduleTypes: z.array(z.object({ id, name: z.string(), archived: z.boolean() })),
    unitTypes: z.array(z.object({ id, name: z.string(), archived: z.boolean(), kind: z.enum(UNIT_KINDS) })),
    inverterTypes: z.array(
      z.object({
        id,
        name: z.string(),
        archived: z.boolean(),
        acPowerMax: z.number(),
        inputs: z.int(),
      }),
    ),
  }),
});
export type AsBuilt = z.infer<typeof asBuilt>;

const reason = z.string().trim().max(500, asBuiltFields.reasonTooLong).default('');

export const siteCreate = z.strictObject({ values: partValues });
export const siteCreated = z.object({ id });
export type SiteCreated = z.infer<typeof siteCreated>;

export const partAdd = z.strictObject({
  kind: z.enum(PART_KINDS).exclude(['site']),
  values: partValues,
  /** Strings only: so many alike, their names counted up. */
  alike: z.int().min(1, asBuiltFields.oneAtLeast).max(50, asBuiltFields.tooManyAtOnce).default(1),
  /** Of strings alike each is on the next input, the first on the one chosen; false: all on that one. */
  inTurn: z.boolean().default(false),
  reason,
});
export type PartAdd = z.input<typeof partAdd>;
export const partAdded = z.object({
  ids: z.array(id),
  /** A new logger's token, told this once. */
  token: z.string().nullable(),
});
export type PartAdded = z.infer<typeof partAdded>;

export const partChange = z.strictObject({
  kind: z.enum(PART_KINDS),
  /** What the editor saw of the fields that the edit is about, and what they shall be. */
  before: partValues,
  after: partValues,
  reason,
});
export type PartChange = z.input<typeof partChange>;

export const partRemove = z.strictObject({ kind: z.enum(PART_KINDS).exclude(['site']), reason });

export const partParams = z.object({ site: id, part: id });
export const loggerParams = z.object({ site: id, logger: id });
export const tokenAsked = z.strictObject({ reason });
export const tokenMade = z.object({ token: z.string() });

const slotRef = z.strictObject({ string: id, position: z.int().min(1).max(63) });
export const placementsBody = z.strictObject({
  changes: z
    .array(
      z.strictObject({
        slot: slotRef,
        serial: z.string().max(200).nullable(),
        expected: z.string().max(200).nullable().optional(),
      }),
    )
    .max(20_000),
  /** Facts of slots that change with it. */
  slots: z
    .array(
      z.strictObject({
        string: id,
        position: z.int().min(1).max(63),
        moduleType: id.optional(),
        roofPlace: z.string().trim().max(200, asBuiltFields.placeTooLong).optional(),
      }),
    )
    .max(20_000)
    .default([]),
  move: z.boolean().default(false),
  retype: z.boolean().default(false),
  reason,
  /** At a desk, or beside the unit. */
  source: z.enum(['forms', 'on_site']).default('forms'),
  /** When it was done on the roof, where the phone had no network then. */
  at: time.optional(),
});
export type PlacementsBody = z.input<typeof placementsBody>;
export const placed = z.object({
  placed: z.int(),
  removed: z.int(),
  moved: z.int(),
  replaced: z.int(),
  unchanged: z.int(),
});
export type PlacedCounts = z.infer<typeof placed>;

/** How the list of strings stands in the address. */
export const asBuiltView = z.object({
  find: z.string().max(80).catch(''),
  show: z.enum(['all', 'gaps']).catch('all'),
  sort: z.enum(['name', 'slots', 'gaps', 'plane', 'input']).catch('name'),
  order: z.enum(['up', 'down']).catch('up'),
  string: z.union([z.uuid(), z.literal('')]).catch(''),
});
export type AsBuiltView = z.infer<typeof asBuiltView>;

export const HISTORY_KINDS = ['all', 'units', 'strings', 'parts', 'site'] as const;
export const historyView = z.object({
  find: z.string().max(80).catch(''),
  kind: z.enum(HISTORY_KINDS).catch('all'),
  person: z.union([z.uuid(), z.literal('')]).catch(''),
  string: z.union([z.uuid(), z.literal('')]).catch(''),
});
export type HistoryView = z.infer<typeof historyView>;
export const historyQuery = historyView.extend({
  before: z.coerce.number().int().positive().optional(),
  limit: z.coerce.number().int().min(1).max(200).default(50),
});

export const historyItem = z.object({
  id: z.int(),
  at: time,
  /** null: somebody who is gone. */
  person: z.string().nullable(),
  action: z.string(),
  /** What was changed, in words. */
  of: z.string(),
  before: z.record(z.string(), z.unknown()),
  after: z.record(z.string(), z.unknown()),
  reason: z.string(),
  source: z.string().nullable(),
});
export type HistoryItem = z.infer<typeof historyItem>;

/** One stay of a unit in a slot. */
export const stay = z.object({
  serial: z.string(),
  unitType: z.string(),
  site: z.string(),
  siteId: id,
  string: z.string(),
  stringId: id,
  position: z.int(),
  from: time,
  to: time.nullable(),
});
export type Stay = z.infer<typeof stay>;

export const historyPage = z.object({
  at: time,
  site: z.object({ id, name: z.string(), timeZone: z.string() }),
  items: z.array(historyItem), // newest first
  /** Pass it as `before` for older ones; null: there are none. */
  before: z.int().nullable(),
  /** Where `find` is a serial: that unit's whole life. */
  stays: z.array(stay),
  people: z.array(z.object({ id, name: z.string() })),
  strings: z.array(z.object({ id, name: z.string() })),
});
export type HistoryPage = z.infer<typeof historyPage>;
