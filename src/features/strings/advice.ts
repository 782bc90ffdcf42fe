import { listed } from '../../drawings/numbers';
import type { StringPage } from '../../schemas/api/string';
import type { SlotNow } from '../../schemas/api/now';
import { modulesMissing, positionsInWords, unitsWhere, type Finding } from '../../words/strings-sentences';
import { stringsAdvice } from '../../words/strings';
import { capital } from '../../words/domain-counts';

/** What the readings say, what to do next, and the caution that stands beside it. */
export interface Explanation {
  title: string;
  /** 0 … 1, only where a judgement gave one. */
  confidence: number | null;
  text: string;
  tone: 'rust' | 'crimson' | 'plum' | 'slate' | 'petrol';
}
export interface Readings {
  main: Explanation | null;
  /** What else it could be, as the judgement lists it. */
  couldBe: string[];
  /** Where a limit or a grace comes from. */
  source: string;
}

function evidenceText(held: readonly SlotNow[], page: StringPage): string {
  const many = held.length > 1;
  const parts: string[] = [];
  const measured = held.every(
    (s) => page.evidence.units.find((e) => e.position === s.position)?.basis === 'measured',
  );
  parts.push(stringsAdvice.shutdownWhileTheString(many, held.length));
  if (measured) parts.push(stringsAdvice.theVoltageOnOutput(many));
  const lit = held.filter((s) => s.voltageIn !== null && s.voltageIn > 5);
  if (lit.length === held.length) parts.push(stringsAdvice.manyAlive(many));
  if (modulesMissing(page.string) === held.length) parts.push(stringsAdvice.theStringLacksJust(many));
  return `${listed(parts)}.`;
}

/** The readings in words. Probabilities stand only where a judgement gave them. */
export function readingsOf(page: StringPage, finding: Finding): Readings {
  const { string, evidence } = page;
  const about = (slots: readonly SlotNow[]) =>
    evidence.units.filter((e) => slots.some((s) => s.position === e.position));
  const confidenceOf = (slots: readonly SlotNow[]) => {
    const found = about(slots).map((e) => e.confidence);
    return found.length > 0 ? Math.min(...found) : null;
  };
  const couldBe = (slots: readonly SlotNow[]) => [...new Set(about(slots).flatMap((e) => e.couldBe))];
  const source = (slots: readonly SlotNow[]) => about(slots)[0]?.thresholdSource ?? '';
  switch (finding.kind) {
    case 'stuck': {
      const held = unitsWhere(string, (s) => s.verdict === 'stuck');
      return {
        main: {
          title: stringsAdvice.heldInShutdown(capital(positionsInWords(held))),
          confidence: confidenceOf(held),
          text: evidenceText(held, page),
          tone: 'rust',
        },
        couldBe: couldBe(held),
        source: source(held),
      };
    }
    case 'not_shutting_down':
    case 'positions_unknown':
    case 'unexplained': {
      const live = unitsWhere(string, (s) => s.verdict === 'not_shutting_down');
      if (live.length > 0)
        return {
          main: {
            title: stringsAdvice.stillPassing(capital(positionsInWords(live))),
            confidence: confidenceOf(live),
            text: stringsAdvice.shutdownIsCommandedIts,
            tone: 'crimson',
          },
          couldBe: couldBe(live),
          source: source(live),
        };
      const f = evidence.finding;
      return {
        main: {
          title: string.finding ? capital(string.finding.words) : finding.heading,
          confidence: f?.confidence ?? null,
          text: f
            ? stringsAdvice.measuredBesideExpected(f.measuredV, f.expectedV, f.thresholdV, f.scope)
            : '',
          tone: finding.kind === 'not_shutting_down' ? 'crimson' : 'rust',
        },
        couldBe: f?.couldBe ?? [],
        source: f?.thresholdSource ?? '',
      };
    }
    case 'unconfirmed': {
      const open = unitsWhere(string, (s) => s.verdict === 'unconfirmed');
      return {
        main: {
          title: stringsAdvice.cantTell,
          confidence: null,
          text: stringsAdvice.shutdownIsCommandedAnd,
          tone: 'slate',
        },
        couldBe: couldBe(open),
        source: source(open),
      };
    }
    case 'unsteady': {
      const units = unitsWhere(string, (s) => s.verdict === 'flapping' || s.verdict === 'late');
      return {
        main: {
          title: capital(positionsInWords(units)),
          confidence: confidenceOf(units),
          text: finding.heading,
          tone: 'rust',
        },
        couldBe: couldBe(units),
        source: source(units),
      };
    }
    case 'low':
      return {
        main: {
          title: stringsAdvice.voltageBelowWhatIs,
          confidence: null,
          text: stringsAdvice.expectedFromShadeBypassed(string.expectedFrom),
          tone: 'rust',
        },
        couldBe: [],
        source: '',
      };
    default:
      return { main: null, couldBe: [], source: '' };
  }
}

const placeOf = (slot: SlotNow): string =>
  slot.roofPlace
    ? `${slot.position} (${slot.roofPlace.charAt(0).toLowerCase()}${slot.roofPlace.slice(1)})`
    : stringsAdvice.whosePlaceOnThe(slot.position);
/** Where to go on the roof: four places at most, the table has the rest. */
const walkTo = (slots: readonly SlotNow[]): string =>
  slots.length > 4
    ? stringsAdvice.walkToAndMore(slots.slice(0, 4).map(placeOf).join(', '), slots.length)
    : stringsAdvice.walkTo(listed(slots.map(placeOf)));
const METER = stringsAdvice.haveAQualifiedPerson;

/** Steps, in order, for the person who goes there. */
export function nextSteps(page: StringPage, finding: Finding): string[] {
  const { string } = page;
  switch (finding.kind) {
    case 'stuck': {
      const held = unitsWhere(string, (s) => s.verdict === 'stuck');
      return [
        walkTo(held),
        stringsAdvice.stringIsolatedAndIts,
        stringsAdvice.stillHeldSwapUnit(held[0]?.position),
      ];
    }
    case 'not_shutting_down':
      return [stringsAdvice.keepEverybodyAwayFrom, METER, stringsAdvice.lookForATransmitter];
    case 'positions_unknown':
      return [stringsAdvice.checkThatTheKeep, stringsAdvice.stringIsolatedMeasureIts];
    case 'unexplained':
      return [METER, stringsAdvice.compareTheAsBuilt];
    case 'unconfirmed':
      return [METER, stringsAdvice.untilThatShowsOtherwise];
    case 'unheard': {
      const missing = unitsWhere(string, (s) => s.state === 'unheard');
      return [
        missing.length === string.counts.units ? stringsAdvice.isItsGatewayOn : walkTo(missing),
        stringsAdvice.compareTheSerialsOn,
      ];
    }
    case 'silent':
      return [stringsAdvice.seeWhetherOtherStrings, walkTo(unitsWhere(string, (s) => s.state === 'silent'))];
    case 'low':
      return [stringsAdvice.compareWithYesterdayAnd];
    case 'unsteady':
      return [walkTo(unitsWhere(string, (s) => s.verdict === 'flapping' || s.verdict === 'late'))];
    case 'no_data':
      return [stringsAdvice.isTheLoggerReporting];
    case 'in_shutdown':
    case 'dark':
    case 'passing':
      return [];
  }
}

/** The caution that stands beside what somebody might act on. */
export function cautionOf(finding: Finding): { strong: string; rest: string } {
  const isolate = stringsAdvice.isolateThenProveWith;
  switch (finding.kind) {
    case 'in_shutdown':
      return {
        strong: stringsAdvice.shutdownIsNotIsolation,
        rest: stringsAdvice.eachModuleAndIts(isolate),
      };
    case 'unheard':
      return {
        strong: stringsAdvice.untilTheyHaveAnswered,
        rest: stringsAdvice.andDoNotObey(isolate),
      };
    case 'dark':
      return { strong: stringsAdvice.darkIsNotDead, rest: stringsAdvice.theStringIsLive(isolate) };
    default:
      return { strong: stringsAdvice.aReadingOnThis, rest: isolate };
  }
}
