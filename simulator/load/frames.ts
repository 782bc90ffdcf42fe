import type { Frame } from '../../src/schemas/ingest';
import { keyOf, mix, uniform } from '../chance';

/**
 * Reports of a fleet that is only there to make load: the sun's curve over the day, units that go into shutdown and
 * come back, units that say nothing. A frame depends on its string and its instant alone, so that whoever checks
 * afterwards can make it again; as text it is made once for each quarter of an hour and kind of string.
 */
export interface LoadShape {
  seed: number;
  /** UTC hour at which the sun stands highest over the sites. */
  noonHour: number;
  /** Share of strings with a unit that never reports, and with one that goes into shutdown by itself. */
  silent: number;
  stuck: number;
  /** Share of loggers whose initiator is used now and then. */
  shutdowns: number;
}

/** A string of a logger's roster, as its frames need it. */
export interface LoadString {
  key: number;
  kind: 'plain' | 'silent' | 'stuck';
  /** Whether there is a unit at each slot. */
  present: readonly boolean[];
  /** Frames as text, by quarter of an hour, variant and what the string is doing. */
  readonly made: Map<number, string>;
}

const VARIANTS = 16;
const DAY_S = 86_400;
const BIN_S = 900;
/** Texts of frames kept for one string, or for all that look alike: some hours of catching up. */
const KEPT_TEXTS = 1024;
/** A shutdown by the initiator: ten minutes of every two hours, seconds. */
const SHUTDOWN_EVERY_S = 7200;
export const SHUTDOWN_S = 600;
/** A unit that goes into shutdown by itself: eight minutes of every twenty-four. */
const STUCK_EVERY_S = 1440;
const STUCK_S = 480;

export function loadString(
  shape: LoadShape,
  logger: string,
  index: number,
  present: readonly boolean[],
): LoadString {
  const key = mix(shape.seed, keyOf(`${logger}/${index}`));
  const draw = uniform(key, 1);
  const kind = draw < shape.silent ? 'silent' : draw < shape.silent + shape.stuck ? 'stuck' : 'plain';
  return { key, kind, present, made: kind === 'plain' ? soundLooks(shape, present) : new Map() };
}

/** Sound strings with the same seats taken look alike but for their variant: their texts are kept once for all. */
const looks = new WeakMap<LoadShape, Map<string, Map<number, string>>>();
function soundLooks(shape: LoadShape, present: readonly boolean[]): Map<number, string> {
  const ofShape = looks.get(shape) ?? new Map<string, Map<number, string>>();
  looks.set(shape, ofShape);
  const seats = present.map((p) => (p ? 1 : 0)).join('');
  const made = ofShape.get(seats) ?? new Map<number, string>();
  ofShape.set(seats, made);
  return made;
}

/** Since when the logger's initiator is in force at an instant, epoch s; null: released. */
export function shutdownSince(shape: LoadShape, logger: string, atS: number): number | null {
  const key = mix(shape.seed, keyOf(logger));
  if (uniform(key, 2) >= shape.shutdowns) return null;
  const phase = mix(key, 3) % SHUTDOWN_EVERY_S;
  const since = Math.floor((atS - phase) / SHUTDOWN_EVERY_S) * SHUTDOWN_EVERY_S + phase;
  return atS - since < SHUTDOWN_S ? since : null;
}

const isStuck = (s: LoadString, atS: number): boolean =>
  s.kind === 'stuck' && (atS + (mix(s.key, 4) % STUCK_EVERY_S)) % STUCK_EVERY_S < STUCK_S;

/** 0 … 1: how much of the day's best light there is. */
export function lightAt(shape: LoadShape, atS: number): number {
  const bin = Math.floor((atS % DAY_S) / BIN_S) * BIN_S + BIN_S / 2;
  return Math.max(0, Math.cos(((bin / 3600 - shape.noonHour) / 24) * 2 * Math.PI));
}

/** The frame of a string at an instant; `down`: its initiator is in force. */
export function frameAt(shape: LoadShape, s: LoadString, atS: number, down: boolean): Frame {
  const light = lightAt(shape, atS);
  const variant = (s.key + Math.floor(atS / 60)) % VARIANTS;
  const odd = mix(s.key, 5) % s.present.length;
  const stuck = isStuck(s, atS);
  const frame: Required<Omit<Frame, 'voltageIn' | 'powerOut'>> = {
    voltageOut: [],
    current: [],
    temperature: [],
    signal: [],
    via: [],
    state: [],
  };
  const amps = Math.round(9000 * light) + (mix(variant, 6) & 127);
  s.present.forEach((present, i) => {
    const heard = present && !(s.kind === 'silent' && i === odd) && light > 0.02;
    // while the rest goes down, the odd unit of such a string goes on passing
    const held = i === odd && s.kind === 'stuck' ? stuck !== down : down;
    const noise = mix(variant * 64 + i, 7) & 31;
    frame.voltageOut.push(heard ? (held ? 58 + (noise & 7) : 3150 + 2 * i + noise) : null);
    frame.current.push(heard ? (down ? noise & 3 : amps) : null);
    frame.temperature.push(heard ? Math.round(200 + 250 * light) + noise : null);
    frame.signal.push(heard ? -60 - (mix(i, 8) % 30) : null);
    frame.via.push(heard ? 1 + (i % 3) : null);
    frame.state.push(heard ? (held ? 2 : 1) : null);
  });
  return frame;
}

/** As `frameAt`, as JSON; null while the whole string is in the dark. */
export function frameText(shape: LoadShape, s: LoadString, atS: number, down: boolean): string | null {
  if (lightAt(shape, atS) <= 0.02) return null;
  const bin = Math.floor((atS % DAY_S) / BIN_S);
  const variant = (s.key + Math.floor(atS / 60)) % VARIANTS;
  const which = (bin * VARIANTS + variant) * 4 + (down ? 2 : 0) + (isStuck(s, atS) ? 1 : 0);
  let text = s.made.get(which);
  if (text === undefined) {
    text = JSON.stringify(frameAt(shape, s, atS, down));
    if (s.made.size >= KEPT_TEXTS) s.made.clear();
    s.made.set(which, text);
  }
  return text;
}
