import { mix, uniform } from '../chance';
import { ofKind } from '../faults/book';
import type { Fault } from '../faults/kinds';
import type { Commands } from './commands';
import { NO_UNIT, PASSING, SHUTDOWN, STARTING, UNPOWERED, type StringPlant } from './string-plant';

/** What the faults in force mean for the units of one string; made anew when the faults change. */
export interface UnitFaults {
  stuck: Map<number, 'now' | 'next_release'>;
  keepsPassing: Map<number, 'passing' | 'shutdown'>;
  mute: Set<number>;
  /** Transmitters that the string's units hear though not meant to: all of them, or these places. */
  crossTalk: { transmitter: string; places: Set<number> | null }[];
  unheardTransmitters: Set<string>;
  /** Numbers of gateways whose radio is dead. */
  deadGateways: Set<number>;
}

export function unitFaultsOf(s: StringPlant, faults: readonly Fault[]): UnitFaults {
  const name = s.plan.name;
  const here = <F extends { string: string; position: number }>(list: F[]) =>
    list.filter((f) => f.string === name);
  return {
    stuck: new Map(here(ofKind(faults, 'stuck')).map((f) => [f.position - 1, f.at])),
    keepsPassing: new Map(here(ofKind(faults, 'not_shutting_down')).map((f) => [f.position - 1, f.claims])),
    mute: new Set(here(ofKind(faults, 'unit_mute')).map((f) => f.position - 1)),
    crossTalk: ofKind(faults, 'cross_talk')
      .filter((f) => f.strings.includes(name))
      .map((f) => ({
        transmitter: f.transmitter,
        places: f.positions ? new Set(f.positions.map((p) => p - 1)) : null,
      })),
    unheardTransmitters: new Set(
      ofKind(faults, 'transmitter_unheard')
        .filter((f) => f.strings.includes(name))
        .map((f) => f.transmitter),
    ),
    deadGateways: new Set(
      ofKind(faults, 'gateway_out')
        .filter((f) => f.logger === s.plan.logger && !f.keeps)
        .map((f) => f.gateway),
    ),
  };
}

/** What a unit would do by what it hears: pass, shut down, or go on as it is. */
function wanted(
  s: StringPlant,
  i: number,
  commands: Commands,
  faults: UnitFaults,
  heard: boolean,
): typeof PASSING | typeof SHUTDOWN | null {
  const { releasedBy, outOfBox, onCommandLoss } = s.unitType;
  if (releasedBy === 'keep_alive') {
    const served = s.plan.transmitters.some(
      (t) => commands.transmits(t) && !faults.unheardTransmitters.has(t),
    );
    const stray = faults.crossTalk.some(
      (c) => commands.transmits(c.transmitter) && (c.places === null || c.places.has(i)),
    );
    return served || stray ? PASSING : SHUTDOWN;
  }
  // A unit that nobody has heard yet takes no command at all.
  if (!heard) return outOfBox === 'passing' ? PASSING : SHUTDOWN;
  const cutOff = faults.deadGateways.has(s.plan.slots[i]?.gateway ?? -1);
  if (cutOff) return onCommandLoss === 'shuts_down' ? SHUTDOWN : null;
  return commands.released(s.plan.zone) ? PASSING : SHUTDOWN;
}

/** Seconds that a unit takes to follow, drawn for each change anew. */
function delay(s: StringPlant, i: number, to: number, atS: number, cutOff: boolean): number {
  const u = uniform(mix(s.key, Math.floor(atS)), i);
  const { releasedBy, commandLossAfterS } = s.unitType;
  if (to === SHUTDOWN)
    return releasedBy === 'keep_alive' || cutOff ? commandLossAfterS * (0.75 + 0.25 * u) : 1.5 + 9 * u * u;
  return releasedBy === 'keep_alive' ? 4 + 5 * u : 4 + 12 * u;
}

/**
 * Moves the string's units on to `atS`: power by light, then what they hear, each with its own delay.
 * Returns whether any of them changed its mode.
 */
export function moveUnits(s: StringPlant, atS: number, commands: Commands, faults: UnitFaults): boolean {
  let changed = false;
  for (let i = 0; i < s.size; i++) {
    const before = s.mode[i];
    if (before === NO_UNIT) continue;
    const light = s.irradiance[i] ?? 0;
    const wake = s.wake[i] ?? 0;
    if (before === UNPOWERED ? light < wake : light < wake * 0.8) {
      s.mode[i] = UNPOWERED;
      s.pendingAtS[i] = NaN;
      changed ||= before !== UNPOWERED;
      continue;
    }
    const isHeard = s.heard[i] === 1;
    let target = wanted(s, i, commands, faults, isHeard);
    if (before === UNPOWERED) {
      // Power comes back: a unit that follows commands starts shut and waits to hear; another simply passes.
      const starts = s.unitType.releasedBy === 'keep_alive' || isHeard ? SHUTDOWN : (target ?? SHUTDOWN);
      s.mode[i] = faults.keepsPassing.has(i) ? PASSING : starts;
      target ??= PASSING;
    }
    const stuck = faults.stuck.get(i);
    if (stuck === 'now') {
      s.mode[i] = SHUTDOWN;
      target = SHUTDOWN;
    } else if (stuck === 'next_release' && s.mode[i] !== PASSING) target = SHUTDOWN;
    if (faults.keepsPassing.has(i)) target = s.mode[i] === PASSING ? PASSING : target;
    follow(s, i, target, atS, faults);
    changed ||= s.mode[i] !== before;
  }
  return changed;
}

function follow(s: StringPlant, i: number, target: number | null, atS: number, faults: UnitFaults): void {
  const mode = s.mode[i]!;
  const settled = target === null || mode === target;
  if (settled) {
    s.pendingAtS[i] = NaN;
    return;
  }
  if (Number.isNaN(s.pendingAtS[i]) || s.pendingMode[i] !== target) {
    const cutOff = faults.deadGateways.has(s.plan.slots[i]?.gateway ?? -1);
    s.pendingMode[i] = target;
    s.pendingAtS[i] = atS + delay(s, i, target, atS, cutOff);
    return;
  }
  const left = s.pendingAtS[i]! - atS;
  if (left <= 0) {
    s.mode[i] = target;
    s.pendingAtS[i] = NaN;
  } else if (target === PASSING && mode === SHUTDOWN && left <= 3) s.mode[i] = STARTING;
}

/** Whether any unit of the string is on its way to another mode. */
export const moving = (s: StringPlant): boolean => s.pendingAtS.some((at) => !Number.isNaN(at));
