import type { HeardItem } from '../../schemas/live';
import type { SlotNow, StringNow } from '../../schemas/api/now';
import type { RollCallPage } from '../../schemas/api/roll-call';
import { commissioningTally } from '../../words/commissioning';

/** What the roll call amounts to, counted from the as-built and the answers. */

export interface RollUnit {
  stringId: string;
  stringName: string;
  position: number;
  serial: string;
  roofPlace: string;
  /** Null: still to hear. */
  answer: HeardItem | null;
  /** dBm, newest where the unit reports, else that of its first answer. */
  signal: number | null;
}
export interface StringTally {
  string: StringNow;
  units: RollUnit[];
  heard: number;
  weakest: RollUnit | null;
}
export interface GatewayTally {
  name: string;
  heard: number;
  weakest: RollUnit | null;
  lastHeardAt: string | null;
  silent: boolean;
}
export interface UnknownUnit {
  answer: HeardItem;
  /** Strings that lack units and whose own units answered mostly by the same gateway, the emptiest first. */
  near: { name: string; missing: number }[];
}
export interface RollTally {
  roster: number;
  heard: number;
  units: RollUnit[];
  strings: StringTally[];
  gateways: GatewayTally[];
  missing: RollUnit[];
  unknown: UnknownUnit[];
  weakest: RollUnit | null;
  /** Units that cannot answer a roll call: their type says nothing itself. */
  mute: number;
  /** Slots of the as-built without a unit. */
  emptySlots: number;
}

const weakestOf = (units: readonly RollUnit[]): RollUnit | null =>
  units
    .filter((u) => u.answer !== null && u.signal !== null)
    .reduce<RollUnit | null>(
      (least, u) => (least === null || (u.signal ?? 0) < (least.signal ?? 0) ? u : least),
      null,
    );

function rollUnit(
  string: StringNow,
  slot: SlotNow,
  answers: ReadonlyMap<string, HeardItem>,
): RollUnit | null {
  if (slot.serial === null) return null;
  const answer = answers.get(slot.serial) ?? null;
  return {
    stringId: string.id,
    stringName: string.name,
    position: slot.position,
    serial: slot.serial,
    roofPlace: slot.roofPlace,
    answer,
    signal: answer ? (slot.signal ?? answer.signal) : null,
  };
}

function tallyOfString(string: StringNow, answers: ReadonlyMap<string, HeardItem>): StringTally {
  const units = string.slots.flatMap((slot) => rollUnit(string, slot, answers) ?? []);
  return {
    string,
    units,
    heard: units.filter((u) => u.answer).length,
    weakest: weakestOf(units),
  };
}

function gatewayTallies(page: RollCallPage, units: readonly RollUnit[]): GatewayTally[] {
  const names = [
    ...new Set([...page.gateways.map((g) => g.name), ...units.flatMap((u) => u.answer?.gateway ?? [])]),
  ];
  return names.map((name) => {
    const known = page.gateways.find((g) => g.name === name);
    const own = units.filter((u) => u.answer?.gateway === name);
    return {
      name,
      heard: own.length,
      weakest: weakestOf(own),
      lastHeardAt:
        known?.lastHeardAt ??
        own
          .map((u) => u.answer?.at ?? '')
          .sort()
          .at(-1) ??
        null,
      silent: known?.silent ?? false,
    };
  });
}

function strangersNeighbours(answer: HeardItem, strings: readonly StringTally[]): UnknownUnit['near'] {
  return strings
    .filter((s) => {
      const here = s.units.filter((u) => u.answer?.gateway === answer.gateway).length;
      return s.heard < s.units.length && here > 0 && here * 2 >= s.heard;
    })
    .map((s) => ({ name: s.string.name, missing: s.units.length - s.heard }))
    .sort((a, b) => b.missing - a.missing || a.name.localeCompare(b.name));
}

export function tallyOf(page: RollCallPage): RollTally {
  const answers = new Map(page.answers.map((a) => [a.serial, a]));
  const onRoll = page.strings.filter((s) => s.kind !== 'shutdown_only');
  const strings = onRoll.map((s) => tallyOfString(s, answers));
  const units = strings.flatMap((s) => s.units);
  const serials = new Set(page.strings.flatMap((s) => s.slots.map((slot) => slot.serial)));
  return {
    roster: units.length,
    heard: units.filter((u) => u.answer).length,
    units,
    strings,
    gateways: gatewayTallies(page, units),
    missing: units.filter((u) => !u.answer),
    unknown: page.answers
      .filter((a) => !serials.has(a.serial))
      .map((answer) => ({ answer, near: strangersNeighbours(answer, strings) })),
    weakest: weakestOf(units),
    mute: page.strings
      .filter((s) => s.kind === 'shutdown_only')
      .reduce((n, s) => n + s.slots.filter((slot) => slot.serial !== null).length, 0),
    emptySlots: onRoll.reduce((n, s) => n + s.slots.filter((slot) => slot.serial === null).length, 0),
  };
}

/**
 * Cumulative answers of the roll over time, one point an answer, from `fromS` (epoch seconds) on. Loggers tell whole
 * seconds, so an answer in the second of the start belongs to it.
 */
export function curveOf(
  tally: RollTally,
  fromS: number,
): { before: number; points: { atS: number; heard: number }[] } {
  const times = tally.units
    .flatMap((u) => (u.answer ? [new Date(u.answer.at).getTime() / 1000] : []))
    .sort((a, b) => a - b);
  const before = times.filter((t) => t < Math.floor(fromS)).length;
  const points = times.slice(before).map((atS, i) => ({ atS, heard: before + i + 1 }));
  return { before, points };
}

/** The steps with the roll call as it is heard right now, ahead of the next reading of the page. */
export const liveSteps = (steps: RollCallPage['steps'], tally: RollTally): RollCallPage['steps'] =>
  steps.map((step) =>
    step.key === 'roll_call' && tally.heard > 0
      ? { ...step, words: commissioningTally.ofHeard(tally.heard, tally.roster) }
      : step,
  );
