import { placeReasons } from '../../words/domain-place-suggestions';
import { median, sigmaMad } from '../output/robust';

/**
 * Where a serial that was heard and stands on no as-built may sit. Names strings, each with why; a position only where
 * something says so (a label misread by one character, serials that run on through the gap). Signals in dBm.
 */

export interface SuggestSlot {
  position: number;
  /** null: the slot has no unit on the as-built. */
  serial: string | null;
  /** Whether its serial has answered. */
  heard: boolean;
  /** By whom it answered; null: it has not. */
  gateway: string | null;
  signal: number | null;
}
export interface SuggestString {
  id: string;
  name: string;
  slots: readonly SuggestSlot[];
}
export interface Stranger {
  serial: string;
  gateway: string;
  signal: number | null;
}

export type ReasonKind = 'misread' | 'serial_run' | 'serial_near' | 'gateway' | 'signal' | 'lacks';
export interface Reason {
  kind: ReasonKind;
  words: string;
}
export interface PlaceSuggestion {
  stringId: string;
  stringName: string;
  /** Named only with evidence for it; null: which slot it is the label on the roof says. */
  position: number | null;
  reasons: Reason[];
}

/** How much each reason counts in the order of suggestions: from experience. */
const WEIGHT: Record<ReasonKind, number> = {
  misread: 8,
  serial_run: 6,
  serial_near: 3,
  gateway: 2,
  signal: 1,
  lacks: 0,
};
/** A string's signals spread by this at least, dB: bodies, weather and angle move each by some. From experience. */
const SIGNAL_SPREAD_MIN = 4;
/** Serials that far apart still come from one box. From experience. */
const NEAR = 12;
/** Signs that are taken for one another on a label; from experience. */
const ALIKE = ['0ODQ', '1IL7', '2Z', '5S6', '8B', 'VUY', 'MN', 'CG', 'EF'];

/** The serial as a number at its end and what stands before it; separators don't count. Hexadecimal where it has letters. */
function sequence(serial: string): { stem: string; number: number } | null {
  const bare = serial.replace(/-/g, '');
  const tail = /[0-9A-F]{1,6}$/.exec(bare)?.[0];
  if (!tail || tail.length < 2) return null;
  const decimal = /^\d+$/.test(tail);
  const number = Number.parseInt(tail, decimal ? 10 : 16);
  return { stem: bare.slice(0, bare.length - tail.length), number };
}

/** How far apart two serials lie in one sequence; null: not of one sequence. */
export function serialDistance(a: string, b: string): number | null {
  if (a.length !== b.length) return null;
  const [x, y] = [sequence(a), sequence(b)];
  if (!x || !y || x.stem !== y.stem) return null;
  return Math.abs(x.number - y.number);
}

/** One character taken for another, or two neighbours exchanged; null: more than that. */
export function misreading(
  a: string,
  b: string,
): { kind: 'one' | 'exchanged'; from: string; to: string } | null {
  if (a === b || a.length !== b.length) return null;
  const at = [...a].flatMap((c, i) => (c === b[i] ? [] : [i]));
  const [first, second] = at;
  if (first === undefined) return null;
  if (at.length === 1) return { kind: 'one', from: a[first]!, to: b[first]! };
  if (at.length === 2 && second === first + 1 && a[first] === b[second] && a[second] === b[first])
    return { kind: 'exchanged', from: a.slice(first, second + 1), to: b.slice(first, second + 1) };
  return null;
}

const isAlike = (a: string, b: string): boolean => ALIKE.some((set) => set.includes(a) && set.includes(b));

/** Slots that a stranger may stand in: no unit, or a unit that nobody hears. */
const isOpen = (slot: SuggestSlot): boolean => slot.serial === null || !slot.heard;

/** Places of one stranger, the best founded first. Strings that lack no unit are left out: their places are taken. */
export function suggestPlaces(stranger: Stranger, strings: readonly SuggestString[]): PlaceSuggestion[] {
  // by the serials of the whole site: a box that ran through several strings is near to all of them
  const found = strings.flatMap((s) => {
    const open = s.slots.filter(isOpen);
    if (open.length === 0) return [];
    const { position, reasons } = bySerial(stranger, s, open);
    reasons.push(...byRadio(stranger, s));
    if (reasons.length === 0) return [];
    const empty = open.filter((o) => o.serial === null).length;
    const silent = open.length - empty;
    reasons.push({
      kind: 'lacks',
      words: placeReasons.lacks(empty, silent),
    });
    const score = reasons.reduce((sum, r) => sum + WEIGHT[r.kind], 0);
    return [{ stringId: s.id, stringName: s.name, position, reasons, score, open: open.length }];
  });
  found.sort(
    (a, b) =>
      b.score - a.score ||
      b.open - a.open ||
      a.stringName.localeCompare(b.stringName, 'en', { numeric: true }),
  );
  return found.map(({ stringId, stringName, position, reasons }) => ({
    stringId,
    stringName,
    position,
    reasons,
  }));
}

function bySerial(
  stranger: Stranger,
  s: SuggestString,
  open: readonly SuggestSlot[],
): { position: number | null; reasons: Reason[] } {
  for (const slot of open) {
    const read = slot.serial === null ? null : misreading(slot.serial, stranger.serial);
    if (!read) continue;
    const how =
      read.kind === 'exchanged'
        ? placeReasons.exchanged(read.from, read.to)
        : isAlike(read.from, read.to)
          ? placeReasons.alike(read.from, read.to)
          : placeReasons.apart(read.from, read.to);
    return {
      position: slot.position,
      reasons: [{ kind: 'misread', words: placeReasons.misread(slot.serial ?? '', slot.position, how) }],
    };
  }
  const near = s.slots.flatMap((slot) => {
    const distance =
      slot.serial === null || !slot.heard ? null : serialDistance(slot.serial, stranger.serial);
    return distance === null || distance > NEAR ? [] : [{ slot, distance }];
  });
  // the serials run along the string and this one fits between its two neighbours
  const number = (serial: string | null): number | null =>
    serial === null || serialDistance(serial, stranger.serial) === null
      ? null
      : (sequence(serial)?.number ?? null);
  const mine = sequence(stranger.serial)?.number;
  const run = open.filter(({ position }) => {
    const before = number(s.slots.find((x) => x.position === position - 1 && x.heard)?.serial ?? null);
    const after = number(s.slots.find((x) => x.position === position + 1 && x.heard)?.serial ?? null);
    return (
      mine !== undefined &&
      before !== null &&
      after !== null &&
      Math.abs(after - before) <= 4 &&
      (mine - before) * (after - mine) > 0
    );
  });
  const [only] = run;
  if (only && run.length === 1)
    return {
      position: only.position,
      reasons: [
        {
          kind: 'serial_run',
          words: placeReasons.serialRun(only.position),
        },
      ],
    };
  if (near.length === 0) return { position: null, reasons: [] };
  const nearest = near.reduce((best, n) => (n.distance < best.distance ? n : best));
  return {
    position: null,
    reasons: [
      {
        kind: 'serial_near',
        words: placeReasons.serialNear(nearest.distance, nearest.slot.position),
      },
    ],
  };
}

function byRadio(stranger: Stranger, s: SuggestString): Reason[] {
  const answered = s.slots.filter((slot) => slot.gateway !== null);
  const same = answered.filter((slot) => slot.gateway === stranger.gateway);
  if (same.length === 0 || same.length * 2 < answered.length) return [];
  const reasons: Reason[] = [
    {
      kind: 'gateway',
      words: placeReasons.gateway(same.length, answered.length, stranger.gateway),
    },
  ];
  const signals = same.flatMap((slot) => (slot.signal === null ? [] : [slot.signal]));
  if (stranger.signal === null || signals.length < 3) return reasons;
  const middle = median(signals);
  const spread = Math.max(SIGNAL_SPREAD_MIN, sigmaMad(signals));
  if (Math.abs(stranger.signal - middle) <= 2 * spread)
    reasons.push({
      kind: 'signal',
      words: placeReasons.signal(minus(stranger.signal), minus(Math.round(middle))),
    });
  return reasons;
}

const minus = (n: number): string => String(n).replace('-', '−');
