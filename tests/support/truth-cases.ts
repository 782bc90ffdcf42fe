import { fault as faultSchema, type Fault } from '../../simulator/faults/kinds';
import type { UnitTruth } from '../../simulator/truth';
import type { TruthKind } from './truth';

/** Faults of the simulated plant, each for a site of its own, and what is to be seen of it there. */

export interface TruthCase {
  kind: TruthKind;
  faults: Fault[];
  /** Initiators opened after the faults are in; without them the site stays released. */
  open?: string[];
  /** Units that can't be heard. */
  silent?: (u: UnitTruth) => boolean;
  /** Units that the fault must have put in a state of their own, so that the case is one. */
  differs?: (u: UnitTruth) => boolean;
}
const at = (string: string, position: number) => (u: UnitTruth) =>
  u.string === string && u.position === position;
const place = { string: 'A1', position: 4 } as const;
/** A fault, read as the simulator's own page reads it. */
export const f = (value: unknown): Fault => faultSchema.parse(value);
const onGateway = (number: number) => (u: UnitTruth) => u.string.startsWith('AB'[number - 1] ?? '-');

/** By name. */
export const CASES: [string, TruthCase][] = [
  ['nothing wrong, released', { kind: 'Monitored', faults: [] }],
  ['nothing wrong, shut down', { kind: 'Monitored', faults: [], open: ['Initiator'] }],
  ['optimizing units shut down', { kind: 'Optimizing', faults: [], open: ['Initiator'] }],
  [
    'a stuck unit',
    { kind: 'Monitored', faults: [f({ kind: 'stuck', ...place, at: 'now' })], differs: at('A1', 4) },
  ],
  [
    'a stuck unit that optimizes',
    { kind: 'Optimizing', faults: [f({ kind: 'stuck', ...place, at: 'now' })], differs: at('A1', 4) },
  ],
  [
    'a unit that goes on passing and says so',
    {
      kind: 'Monitored',
      faults: [f({ kind: 'not_shutting_down', ...place })],
      open: ['Initiator'],
      differs: at('A1', 4),
    },
  ],
  [
    'a unit that goes on passing and claims shutdown',
    {
      kind: 'Monitored',
      faults: [f({ kind: 'not_shutting_down', ...place, claims: 'shutdown' })],
      open: ['Initiator'],
      differs: at('A1', 4),
    },
  ],
  [
    'a mute unit while released',
    { kind: 'Monitored', faults: [f({ kind: 'unit_mute', ...place })], silent: at('A1', 4) },
  ],
  [
    'a mute unit while shut down',
    {
      kind: 'Monitored',
      faults: [f({ kind: 'unit_mute', ...place })],
      open: ['Initiator'],
      silent: at('A1', 4),
    },
  ],
  ['a failed bypass diode', { kind: 'Monitored', faults: [f({ kind: 'bypass_diode', ...place })] }],
  [
    'two units in each other’s string',
    {
      kind: 'Monitored',
      faults: [f({ kind: 'wrong_string', ...place, otherString: 'A2', otherPosition: 4 })],
    },
  ],
  ['a bad connector', { kind: 'Monitored', faults: [f({ kind: 'connector', string: 'A1', ohm: 3 })] }],
  ['dirt', { kind: 'Monitored', faults: [f({ kind: 'soiling', string: 'A1', share: 0.3 })] }],
  [
    'shade',
    {
      kind: 'Monitored',
      faults: [f({ kind: 'shade', string: 'A1', positions: [2, 3], fromHour: 0, toHour: 24, share: 0.9 })],
    },
  ],
  ['grid lost', { kind: 'Monitored', faults: [f({ kind: 'grid_lost', inverter: 'Inverter 1' })] }],
  [
    'curtailment',
    { kind: 'Monitored', faults: [f({ kind: 'curtailed', inverter: 'Inverter 1', share: 0.2 })] },
  ],
  ['an earth fault', { kind: 'Monitored', faults: [f({ kind: 'earth_fault', inverter: 'Inverter 1' })] }],
  ['keep-alive lost in a zone', { kind: 'Monitored', faults: [f({ kind: 'command_lost', zone: 'Roof' })] }],
  [
    'power lost in a zone',
    { kind: 'Keep-alive', faults: [f({ kind: 'command_lost', zone: 'Roof', how: 'power_lost' })] },
  ],
  [
    'a transmitter stopped',
    { kind: 'Keep-alive', faults: [f({ kind: 'transmitter_off', transmitter: 'T2' })] },
  ],
  [
    'a transmitter that a string does not hear',
    {
      kind: 'Keep-alive',
      faults: [f({ kind: 'transmitter_unheard', transmitter: 'T1', strings: ['A2'] })],
      differs: (u) => u.string === 'A2',
    },
  ],
  [
    'cross-talk from a neighbour’s transmitter',
    {
      kind: 'Keep-alive',
      faults: [f({ kind: 'cross_talk', transmitter: 'T2', strings: ['A1'] })],
      open: ['Initiator'],
      differs: (u) => u.string === 'A1',
    },
  ],
  [
    'a dead gateway whose units hold, released',
    { kind: 'Holding', faults: [f({ kind: 'gateway_out', logger: '', gateway: 2 })], silent: onGateway(2) },
  ],
  [
    'a dead gateway whose units hold, shut down',
    {
      kind: 'Holding',
      faults: [f({ kind: 'gateway_out', logger: '', gateway: 2 })],
      open: ['Initiator'],
      silent: onGateway(2),
    },
  ],
  [
    'a gateway that keeps what it hears',
    {
      kind: 'Monitored',
      faults: [f({ kind: 'gateway_out', logger: '', gateway: 2, keeps: true })],
      silent: onGateway(2),
    },
  ],
  ['shutdown-only units shut down', { kind: 'Shutdown-only', faults: [], open: ['Initiator'] }],
  ['units that nobody has heard', { kind: 'Commissioning', faults: [], open: ['Initiator'] }],
];
