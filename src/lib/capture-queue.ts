/**
 * What a phone has recorded and the server does not have yet. Pure: what to send next, and what an answer makes of it.
 * A record keeps its `ref` from the moment it is made until the server has it, so that sending it again is harmless;
 * there is no state "being sent", so that a crash in the middle leaves it waiting.
 */

export const RECORD_KINDS = ['reading', 'check', 'photo'] as const;
export type RecordKind = (typeof RECORD_KINDS)[number];

export interface Problem {
  title: string;
  message: string;
  fields: readonly { field: string; message: string }[];
}

/** One record of one person. `body` is what is sent; of a photo its description, the bytes are kept apart. */
export interface Waiting<Body = Record<string, unknown>> {
  /** Made on the phone; the server's identifier of it too. */
  ref: string;
  /** Whose it is, by public identifier: nobody else sees or sends it. */
  person: string;
  site: string;
  string: string;
  kind: RecordKind;
  /** Order in which this phone made it. */
  number: number;
  /** The phone's clock, ISO 8601. */
  madeAt: string;
  /** "B2, + to −: 7.8 V" */
  label: string;
  body: Body;
  state: 'waiting' | 'conflict' | 'refused';
  tries: number;
  /** Not to be tried before, ms since 1970. */
  notBefore: number;
  problem: Problem | null;
  /** The record that stands on the server instead, of a conflict. */
  current: unknown;
}

/** How the server is reached, as far as the last answer told. */
export interface Link {
  /** `other_person`: somebody else is signed in by now. */
  state: 'open' | 'unreachable' | 'signed_out' | 'other_person';
  tries: number;
  notBefore: number;
}
export const OPEN_LINK: Link = { state: 'open', tries: 0, notBefore: 0 };

export type Answer =
  /** It is stored, now or since an earlier try. */
  | { kind: 'stored' }
  /** No answer: nobody knows whether it arrived. */
  | { kind: 'unreachable' }
  /** The server had a fault of its own or asks for patience. */
  | { kind: 'busy'; retryAfterS: number | null }
  | { kind: 'signed_out' }
  | { kind: 'other_person' }
  /** Somebody else's record stands where this one would. */
  | { kind: 'conflict'; current: unknown; problem: Problem }
  | { kind: 'refused'; problem: Problem };

const FIRST_WAIT_MS = 2000;
const LONGEST_WAIT_MS = 5 * 60_000;
/** Doubles from 2 s to 5 min, less up to a half by chance, so that phones do not come back all at once. */
export const backOff = (tries: number, random: number): number =>
  Math.min(LONGEST_WAIT_MS, FIRST_WAIT_MS * 2 ** Math.min(tries, 20)) * (1 - random / 2);

const textOf = (body: Record<string, unknown>, key: string): string | null => {
  const value = body[key];
  return typeof value === 'string' ? value : null;
};
/** The waiting records that this one speaks of: what it corrects, what it is a photo of. */
const speaksOf = (record: Waiting): (string | null)[] => [
  textOf(record.body, 'supersedes'),
  record.kind === 'photo' ? textOf(record.body, 'subjectRef') : null,
];

export const inOrder = (records: readonly Waiting[]): Waiting[] =>
  [...records].sort((a, b) => a.number - b.number);
export const ofPerson = (records: readonly Waiting[], person: string): Waiting[] =>
  inOrder(records.filter((r) => r.person === person));

export type Step = { send: Waiting } | { waitUntil: number } | { idle: true };

/**
 * What to send next: the oldest that may go. What speaks of a record that waits for a decision waits with it; behind a
 * record that the server could not take yet wait the later ones of its string, and nothing else.
 */
export function nextStep(records: readonly Waiting[], person: string, link: Link, now: number): Step {
  if (link.state === 'signed_out' || link.state === 'other_person') return { idle: true };
  const held = new Set<string>();
  const heldStrings = new Set<string>();
  let first: Waiting | null = null;
  let earliest = Infinity;
  for (const record of ofPerson(records, person)) {
    const waits =
      record.state !== 'waiting' ||
      heldStrings.has(record.string) ||
      speaksOf(record).some((ref) => ref !== null && held.has(ref));
    if (waits) {
      held.add(record.ref);
      continue;
    }
    if (record.notBefore > now) {
      held.add(record.ref);
      heldStrings.add(record.string);
      earliest = Math.min(earliest, record.notBefore);
      continue;
    }
    first ??= record;
  }
  if (first) return link.notBefore > now ? { waitUntil: link.notBefore } : { send: first };
  return earliest < Infinity ? { waitUntil: Math.max(earliest, link.notBefore) } : { idle: true };
}

export interface Settled {
  /** null: the server has it, it leaves the phone. */
  record: Waiting | null;
  link: Link;
}

/** What an answer makes of the record that was sent and of the link. `random` 0 … 1. */
export function settle(record: Waiting, answer: Answer, link: Link, now: number, random: number): Settled {
  const open: Link = { ...OPEN_LINK };
  switch (answer.kind) {
    case 'stored':
      return { record: null, link: open };
    case 'unreachable':
      return {
        record,
        link: { state: 'unreachable', tries: link.tries + 1, notBefore: now + backOff(link.tries, random) },
      };
    case 'busy': {
      const wait = answer.retryAfterS === null ? backOff(record.tries, random) : answer.retryAfterS * 1000;
      return { record: { ...record, tries: record.tries + 1, notBefore: now + wait }, link: open };
    }
    case 'signed_out':
    case 'other_person':
      return { record, link: { state: answer.kind, tries: 0, notBefore: 0 } };
    case 'conflict':
      return {
        record: { ...record, state: 'conflict', problem: answer.problem, current: answer.current },
        link: open,
      };
    case 'refused':
      return { record: { ...record, state: 'refused', problem: answer.problem, current: null }, link: open };
  }
}

/** Somebody asks for a try now, or the network came back: no more waiting. */
export const wakeLink = (link: Link): Link => ({ ...link, tries: 0, notBefore: 0 });
export const wake = (record: Waiting): Waiting => ({ ...record, tries: 0, notBefore: 0 });
/** After signing in again. */
export const signedIn = (): Link => ({ ...OPEN_LINK });

/** The changed record goes again: what a person corrected of one that was refused, or merged of a conflict. */
export const corrected = (record: Waiting, body: Waiting['body'], label: string): Waiting => ({
  ...record,
  body,
  label,
  state: 'waiting',
  tries: 0,
  notBefore: 0,
  problem: null,
  current: null,
});

/** "Keep mine": it goes again as the successor of what stands on the server. */
export const kept = (record: Waiting, currentRef: string): Waiting =>
  corrected(record, { ...record.body, supersedes: currentRef }, record.label);

/**
 * Leaves one out by its person's word. What spoke of it speaks of `instead` (the record that stands on the server) or
 * of what it would have corrected itself.
 */
export function leftOut(
  records: readonly Waiting[],
  ref: string,
  instead: string | null,
): { changed: Waiting[]; removed: string[] } {
  const record = records.find((r) => r.ref === ref);
  if (!record) return { changed: [], removed: [] };
  const heir = instead ?? textOf(record.body, 'supersedes');
  const changed: Waiting[] = [];
  const removed = [ref];
  for (const other of records) {
    if (other.person !== record.person || other.ref === ref) continue;
    if (textOf(other.body, 'supersedes') === ref)
      changed.push({ ...other, body: { ...other.body, supersedes: heir } });
    else if (other.kind === 'photo' && textOf(other.body, 'subjectRef') === ref) {
      if (heir === null) removed.push(other.ref);
      else changed.push({ ...other, body: { ...other.body, subjectRef: heir } });
    }
  }
  return { changed, removed };
}

export interface Tally {
  /** Of this person, on their way. */
  waiting: number;
  /** Of this person, wanting a decision. */
  conflicts: number;
  refused: number;
  /** Of anybody else who used this phone. */
  ofOthers: number;
}
export function tally(records: readonly Waiting[], person: string | null): Tally {
  const mine = records.filter((r) => r.person === person);
  return {
    waiting: mine.filter((r) => r.state === 'waiting').length,
    conflicts: mine.filter((r) => r.state === 'conflict').length,
    refused: mine.filter((r) => r.state === 'refused').length,
    ofOthers: records.length - mine.length,
  };
}
