import { UNIT_KINDS } from '../../domain/equipment/unit-type';
import { KIND_LABELS } from '../../components/readings/kind-labels';
import { siteClock } from '../../components/ui/reader-zone';
import type { PhoneState } from '../../lib/capture-phone';
import { tally } from '../../lib/capture-queue';
import type { CaptureSnapshot, CaptureString } from '../../schemas/api/capture';
import { typesOf } from './view';
import { captureWords } from '../../words/capture';

/** "14 units, shutdown-only" */
export function countAndKind(site: CaptureSnapshot, string: CaptureString): string {
  const kind = typesOf(site, string).unitType?.kind ?? UNIT_KINDS[0];
  return `${captureWords.countedUnitsUnit(string.units)}, ${KIND_LABELS[kind].toLowerCase()}`;
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
      ? captureWords.yourSessionHasEnded(all)
      : link.state === 'other_person'
        ? captureWords.anotherPersonIsSigned
        : unreachableSince
          ? captureWords.noNetworkSinceWhat(siteClock(unreachableSince, now, zone, readerZone))
          : decisions > 0
            ? decisions === 1
              ? captureWords.oneRecordWantsYour
              : captureWords.recordsWantYourDecision(decisions)
            : '';
  return {
    age: snapshot ? captureWords.asOf(siteClock(snapshot.at, now, zone, readerZone)) : '',
    waiting: all > 0 ? captureWords.allWaiting(all) : '',
    why,
    others: t.ofOthers > 0 ? captureWords.waitingFromAnotherPerson(t.ofOthers) : '',
    signIn: link.state === 'signed_out',
    mayTry: link.state === 'unreachable' || (all > decisions && state.sending === null),
  };
}
