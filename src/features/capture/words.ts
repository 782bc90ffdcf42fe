import { UNIT_KINDS } from '../../domain/equipment/unit-type';
import { KIND_LABELS } from '../../components/readings/words';
import { counted } from '../../drawings/numbers';
import { siteClock } from '../../components/ui/reader-zone';
import type { PhoneState } from '../../lib/capture-phone';
import { tally } from '../../lib/capture-queue';
import type { CaptureSnapshot, CaptureString } from '../../schemas/api/capture';
import { typesOf } from './view';

/** "14 units, shutdown-only" */
export function countAndKind(site: CaptureSnapshot, string: CaptureString): string {
  const kind = typesOf(site, string).unitType?.kind ?? UNIT_KINDS[0];
  return `${counted(string.units, 'unit')}, ${KIND_LABELS[kind].toLowerCase()}`;
}

export interface StripWords {
  /** How old what is shown is. */
  age: string;
  /** What waits, by itself: "3 waiting"; empty: nothing does. */
  waiting: string;
  /** What keeps it from going, and what to do; empty: nothing does. */
  why: string;
  /** What waits from somebody else. */
  others: string;
  signIn: boolean;
  mayTry: boolean;
}

/** The line under the head: age of what is shown, what waits, what keeps it. */
export function stripWords(state: PhoneState, now: Date, readerZone: string | null): StripWords {
  const { snapshot, link, unreachableSince } = state;
  const zone = snapshot?.site.timeZone ?? 'UTC';
  const t = tally(state.records, state.here?.person ?? null);
  const all = t.waiting + t.conflicts + t.refused;
  const decisions = t.conflicts + t.refused;
  const why =
    link.state === 'signed_out'
      ? `Your session has ended. Sign in again${all > 0 ? ', then what waits is sent' : ''}; nothing is lost.`
      : link.state === 'other_person'
        ? 'Another person is signed in on this phone by now. Load this page again to see theirs; yours is kept.'
        : unreachableSince
          ? `No network since ${siteClock(unreachableSince, now, zone, readerZone)}. What you record is kept on this phone and sent when it returns.`
          : decisions > 0
            ? decisions === 1
              ? 'One record wants your decision.'
              : `${decisions} records want your decision.`
            : '';
  return {
    age: snapshot ? `As of ${siteClock(snapshot.at, now, zone, readerZone)}` : '',
    waiting: all > 0 ? `${all} waiting` : '',
    why,
    others:
      t.ofOthers > 0
        ? `${t.ofOthers} waiting from another person: kept on this phone, sent when that person signs in here.`
        : '',
    signIn: link.state === 'signed_out',
    mayTry: link.state === 'unreachable' || (all > decisions && state.sending === null),
  };
}
