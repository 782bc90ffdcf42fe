import { z } from 'zod';

/** What can go wrong in the simulated plant. Places are named as on the drawing: string, position, gateway number. */

const string = z.string().min(1).max(40);
const position = z.int().min(1).max(63);
const place = { string, position };

export const fault = z.discriminatedUnion('kind', [
  /** Stays in shutdown once it is there; `at: now` puts it there at once. */
  z.strictObject({
    kind: z.literal('stuck'),
    ...place,
    at: z.enum(['now', 'next_release']).default('now'),
  }),
  /** Goes on passing when shutdown is asked; `claims` is what it says of itself meanwhile. */
  z.strictObject({
    kind: z.literal('not_shutting_down'),
    ...place,
    claims: z.enum(['passing', 'shutdown']).default('passing'),
  }),
  /** The unit works and its radio does not. */
  z.strictObject({ kind: z.literal('unit_mute'), ...place }),
  /** One sub-string of cells is bypassed all the time. */
  z.strictObject({ kind: z.literal('bypass_diode'), ...place, groups: z.int().min(1).max(3).default(1) }),
  /** The units on the drawing at two places sit in each other's. */
  z.strictObject({
    kind: z.literal('wrong_string'),
    ...place,
    otherString: string,
    otherPosition: position,
  }),
  /** Somebody has opened the string's own load-break switch: it carries no current. */
  z.strictObject({ kind: z.literal('string_isolated'), string }),
  /** A connector of the string has gone bad. */
  z.strictObject({ kind: z.literal('connector'), string, ohm: z.number().min(0).max(50) }),
  z.strictObject({ kind: z.literal('soiling'), string, share: z.number().min(0).max(0.9) }),
  /** Something new stands over these positions between two hours of solar time. */
  z.strictObject({
    kind: z.literal('shade'),
    string,
    positions: z.array(position).min(1).max(63),
    fromHour: z.number().min(0).max(24),
    toHour: z.number().min(0).max(24),
    share: z.number().min(0).max(1).default(0.7),
  }),
  /** Covered: no light reaches the modules of the plane (every plane where none is named). */
  z.strictObject({ kind: z.literal('snow'), plane: z.string().max(80).optional() }),
  /** A transmitter has stopped; the initiator has not been touched. */
  z.strictObject({ kind: z.literal('transmitter_off'), transmitter: z.string().max(64) }),
  /** A transmitter runs and these strings don't hear it. */
  z.strictObject({
    kind: z.literal('transmitter_unheard'),
    transmitter: z.string().max(64),
    strings: z.array(string).min(1),
  }),
  /** A transmitter's signal reaches the units of strings that it does not serve. */
  z.strictObject({
    kind: z.literal('cross_talk'),
    transmitter: z.string().max(64),
    strings: z.array(string).min(1),
    positions: z.array(position).optional(),
  }),
  /** The keep-alive of the whole zone is gone, or its supply. */
  z.strictObject({
    kind: z.literal('command_lost'),
    zone: z.string().max(64),
    how: z.enum(['keep_alive_lost', 'power_lost']).default('keep_alive_lost'),
  }),
  /** A roof radio is dead; `keeps`: it goes on listening and hands over what it heard when it is back. */
  z.strictObject({
    kind: z.literal('gateway_out'),
    logger: z.string().max(64),
    gateway: z.int().min(0).max(255),
    keeps: z.boolean().default(false),
  }),
  /** The logger has lost its way to Wakeline; it keeps its readings and replays them. */
  z.strictObject({ kind: z.literal('uplink_out'), logger: z.string().max(64) }),
  z.strictObject({ kind: z.literal('grid_lost'), inverter: z.string().max(64) }),
  z.strictObject({
    kind: z.literal('curtailed'),
    inverter: z.string().max(64),
    share: z.number().min(0).max(1),
  }),
  z.strictObject({ kind: z.literal('earth_fault'), inverter: z.string().max(64) }),
]);

export type Fault = z.infer<typeof fault>;
export type FaultKind = Fault['kind'];

/** Each kind in a few words, for the plant's own page. */
export const FAULT_WORDS: Record<FaultKind, string> = {
  stuck: 'Unit stuck in shutdown',
  not_shutting_down: 'Unit goes on passing when shutdown is asked',
  unit_mute: 'Unit whose radio is dead',
  bypass_diode: 'Failed bypass diode',
  wrong_string: 'Two units in each other’s place',
  string_isolated: 'String isolated by its load-break switch',
  connector: 'Connector gone bad',
  soiling: 'Dirt on a string',
  shade: 'Shade on positions of a string',
  snow: 'Snow',
  transmitter_off: 'Transmitter stopped',
  transmitter_unheard: 'Transmitter not heard by strings',
  cross_talk: 'Transmitter reaches strings of others',
  command_lost: 'Keep-alive or supply of a zone lost',
  gateway_out: 'Gateway dead',
  uplink_out: 'Logger cut off',
  grid_lost: 'Grid lost at an inverter',
  curtailed: 'Inverter curtailed',
  earth_fault: 'Earth fault at an inverter',
};
