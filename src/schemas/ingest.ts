import { z } from 'zod';
import { COMMANDS, INVERTER_STATUSES } from '../domain/verdicts/codes';
import { BATCH_MESSAGES_MAX } from './lists-and-limits';

/**
 * The wire protocol of /ingest/v1: WebSocket text frames, one JSON object each, columns not rows, integers
 * scaled as named. Versions add messages and never change one. The arrays of `frames` are checked by
 * `server/ingest/check.ts` (a tight loop); everything else by these schemas.
 */
export const PROTOCOL = 1;
export const MESSAGE_MAX_BYTES = 4 * 1024 * 1024;
/** A logger's clock may run ahead by so much before its readings are refused. */
export const CLOCK_AHEAD_MAX_S = 300;
export const SLOTS_MAX = 63;

const seq = z.int().min(0);
const epoch = z.int().min(1_500_000_000).max(4_102_444_800);
/** The database keeps no NUL, and a name has no use for other control characters. */
const text = (max: number) =>
  z
    .string()
    .max(max)
    .regex(/^\P{Cc}*$/u, 'has a control character');
const serial = z.string().regex(/^[A-Z0-9][A-Z0-9-]{3,31}$/);

// ---- from the logger ----
export const hello = z.strictObject({
  type: z.literal('hello'),
  protocol: z.int(),
  logger: text(64),
  firmware: text(64),
  clock: epoch,
});

/** Ranges of the values in `frames`, inclusive; null: the unit was not heard in that frame. */
export const FRAME_RANGES = {
  voltageOut: [-2000, 20_000], // cV
  voltageIn: [-2000, 20_000], // cV
  current: [-2000, 32_000], // mA
  powerOut: [-100, 20_000], // dW
  temperature: [-600, 1500], // 0.1 °C
  signal: [-140, 0], // dBm
  via: [0, 255], // gateway number
  state: [0, 4], // CLAIMS
} as const;
export type FrameField = keyof typeof FRAME_RANGES;

/** One string at one instant: arrays over its slots in order. `voltageOut`, `voltageIn` as the unit type measures. */
export interface Frame {
  voltageOut?: (number | null)[];
  voltageIn?: (number | null)[];
  current: (number | null)[];
  powerOut?: (number | null)[];
  temperature: (number | null)[];
  signal: (number | null)[];
  via: (number | null)[];
  state: (number | null)[];
}
/** `at[i]`, `string[i]` (roster index) and `frames[i]` belong together. */
export interface FramesMessage {
  type: 'frames';
  seq: number;
  roster: number;
  at: number[];
  string: number[];
  frames: Frame[];
}
export const framesEnvelope = z.strictObject({
  type: z.literal('frames'),
  seq,
  roster: z.int().min(1),
  at: z.array(epoch).min(1).max(2000),
  string: z.array(z.int().min(0).max(32_767)).min(1).max(2000),
  frames: z.array(z.unknown()).min(1).max(2000),
});

const rows = <T extends z.ZodRawShape>(shape: T) =>
  z
    .array(z.strictObject({ at: epoch, ...shape }))
    .min(1)
    .max(5000);

export const inputs = z.strictObject({
  type: z.literal('inputs'),
  seq,
  rows: rows({
    inverter: text(64), // its name in the roster
    input: z.int().min(1).max(64),
    voltage: z.int().min(-20_000).max(20_000).nullable(), // dV
    current: z.int().min(-10_000).max(60_000).nullable(), // cA
  }),
});

export const inverters = z.strictObject({
  type: z.literal('inverters'),
  seq,
  rows: rows({
    inverter: text(64),
    acPower: z.int().min(-10_000).max(10_000_000).nullable(), // W
    energy: z.int().min(0).nullable(), // Wh, counter
    status: z.enum(INVERTER_STATUSES),
    powerLimit: z.int().min(0).nullable(), // W
    insulation: z.int().min(0).nullable(), // kohm
    arcFlag: z.boolean(),
    earthFaultFlag: z.boolean(),
  }),
});

export const weather = z.strictObject({
  type: z.literal('weather'),
  seq,
  rows: rows({
    sensor: z.int().min(0).max(255), // its number in the roster
    irradiance: z.int().min(-20).max(2000).nullable(), // W/m², poaGlobal or ghi as the sensor's kind says
    temperatureAir: z.int().min(-600).max(700).nullable(), // 0.1 °C
    temperatureModule: z.int().min(-600).max(1300).nullable(), // 0.1 °C
    windSpeed: z.int().min(0).max(900).nullable(), // 0.1 m/s
  }),
});

export const heard = z.strictObject({
  type: z.literal('heard'),
  seq,
  rows: rows({
    serial,
    gateway: z.int().min(0).max(255),
    signal: z.int().min(-140).max(0),
    voltage: z.int().min(-2000).max(20_000).nullable(), // cV
    current: z.int().min(-2000).max(32_000).nullable(), // mA
  }),
});

export const command = z.strictObject({
  type: z.literal('command'),
  seq,
  /** One of the two names, as in the roster. */
  zone: text(64).optional(),
  transmitter: text(64).optional(),
  inForce: z.enum(COMMANDS),
  since: epoch,
  by: text(120),
});

export const trace = z.strictObject({
  type: z.literal('trace'),
  seq,
  string: z.int().min(0).max(32_767), // roster index
  startedAt: epoch,
  measuringPoint: z.enum(['home_run', 'input', 'unit_sum']),
  accuracy: z.number().min(0).max(100), // V
  voltage: z.array(z.int().min(-20_000).max(20_000).nullable()).min(1).max(300), // dV, one a second
  unitVoltage: z
    .array(z.array(z.int().min(-2000).max(20_000).nullable()).max(SLOTS_MAX))
    .max(300)
    .optional(), // cV
});

/** Every message of a logger but `frames`. */
export const loggerMessage = z.discriminatedUnion('type', [
  hello,
  inputs,
  inverters,
  weather,
  heard,
  command,
  trace,
]);
export type LoggerMessage = z.infer<typeof loggerMessage> | FramesMessage;

// ---- to the logger: these and nothing else. None switches anything. ----
export const rosterString = z.strictObject({
  index: z.int(),
  name: z.string(),
  kind: z.string(),
  zone: z.string(),
  inverter: z.string(),
  input: z.int(),
  serials: z.array(serial.nullable()), // slot order; null: no unit there
});
export const roster = z.strictObject({
  type: z.literal('roster'),
  version: z.int().min(1),
  reportIntervalS: z.int(),
  strings: z.array(rosterString),
  inverters: z.array(z.strictObject({ name: z.string(), inputs: z.array(z.int()) })),
  gateways: z.array(z.strictObject({ number: z.int(), name: z.string() })),
  sensors: z.array(z.strictObject({ number: z.int(), kind: z.string() })),
  zones: z.array(z.string()),
  transmitters: z.array(z.string()),
});
export const serverMessage = z.discriminatedUnion('type', [
  roster,
  z.strictObject({ type: z.literal('ack'), seq }), // after COMMIT only
  z.strictObject({
    type: z.literal('refused'),
    seq: seq.nullable(), // null: the message was not readable enough to find one
    field: z.string(),
    reason: z.string(),
    again: z.boolean(), // whether sending again can help
  }),
  z.strictObject({ type: z.literal('wait'), ms: z.int().min(0) }),
  z.strictObject({ type: z.literal('listen'), on: z.boolean() }), // start or stop a roll call
]);
export type ServerMessage = z.infer<typeof serverMessage>;
export type Roster = z.infer<typeof roster>;

// ---- by HTTPS: POST /api/v1/ingest takes the messages above, and answers after COMMIT ----
/** The body: one message, or a list of them; as NDJSON (application/x-ndjson) one message a line. */
export const ingestMessage = z.union([loggerMessage, framesEnvelope]);
export const ingestBatch = z.union([ingestMessage, z.array(ingestMessage).min(1).max(BATCH_MESSAGES_MAX)]);

export const refusedItem = z.object({
  /** Of the message in the batch, from 0. */
  index: z.int(),
  seq: z.int().nullable(),
  field: z.string(),
  reason: z.string(),
  remedy: z.string(),
  /** Whether sending the same again can help. */
  again: z.boolean(),
});
export type RefusedItem = z.infer<typeof refusedItem>;

/** What became of a batch; whatever is counted as accepted is durable. */
export const ingestReply = z.object({
  messages: z.int(),
  accepted: z.int(),
  readings: z.int(),
  refused: z.array(refusedItem),
  /** The roster's version as it is now: fetch it again where the logger has another. */
  roster: z.int(),
  /** A roll call is open: report what is heard (`heard`). */
  listen: z.boolean(),
});
export type IngestReply = z.infer<typeof ingestReply>;

/** GET /api/v1/ingest/roster */
export const rosterReply = z.object({ roster, listen: z.boolean() });
export type RosterReply = z.infer<typeof rosterReply>;
