import { listed, volts } from '../../drawings/numbers';
import type { StringPage } from '../../schemas/api/string';
import type { SlotNow } from '../../schemas/api/now';
import { modulesMissing, positionsInWords, unitsWhere, type Finding } from './words';

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

const upper = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

function evidenceText(held: readonly SlotNow[], page: StringPage): string {
  const many = held.length > 1;
  const parts: string[] = [];
  const measured = held.every(
    (s) => page.evidence.units.find((e) => e.position === s.position)?.basis === 'measured',
  );
  parts.push(
    `${many ? (held.length === 2 ? 'Both report' : 'All report') : 'It reports'} shutdown while the string is released`,
  );
  if (measured) parts.push(`the voltage on ${many ? 'their' : 'its'} output shows it`);
  const lit = held.filter((s) => s.voltageIn !== null && s.voltageIn > 5);
  if (lit.length === held.length) parts.push(`${many ? 'their inputs are' : 'its input is'} alive`);
  if (modulesMissing(page.string) === held.length)
    parts.push(`the string lacks just ${many ? 'their share' : 'its share'}`);
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
          title: `${upper(positionsInWords(held))} held in shutdown`,
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
            title: `${upper(positionsInWords(live))} still passing`,
            confidence: confidenceOf(live),
            text: 'Shutdown is commanded, its time is over, and voltage stands at their output.',
            tone: 'crimson',
          },
          couldBe: couldBe(live),
          source: source(live),
        };
      const f = evidence.finding;
      return {
        main: {
          title: string.finding ? upper(string.finding.words) : finding.heading,
          confidence: f?.confidence ?? null,
          text: f
            ? `Measured ${volts(f.measuredV)}${f.expectedV === null ? '' : `, expected ${volts(f.expectedV)}`}; the threshold is ${volts(f.thresholdV)}.${f.scope === 'input' ? ' Strings share this input: which of them it is can not be told.' : ''}`
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
          title: 'Can’t tell',
          confidence: null,
          text: 'Shutdown is commanded, and no reading shows whether these units followed.',
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
          title: upper(positionsInWords(units)),
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
          title: 'Voltage below what is expected',
          confidence: null,
          text: `Expected from ${string.expectedFrom}. Shade, a bypassed part of a module and a wrong count of modules all look like this at one instant; the days tell them apart.`,
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
    : `${slot.position}, whose place on the roof is not entered`;
/** Where to go on the roof: four places at most, the table has the rest. */
const walkTo = (slots: readonly SlotNow[]): string =>
  slots.length > 4
    ? `Walk to ${slots.slice(0, 4).map(placeOf).join(', ')} and ${slots.length - 4} more, listed below.`
    : `Walk to ${listed(slots.map(placeOf))}.`;
const METER =
  'Have a qualified person measure the home run at the inverter end with a rated meter: + to −, + to earth, − to earth.';

/** Steps, in order, for the person who goes there. */
export function nextSteps(page: StringPage, finding: Finding): string[] {
  const { string } = page;
  switch (finding.kind) {
    case 'stuck': {
      const held = unitsWhere(string, (s) => s.verdict === 'stuck');
      return [
        walkTo(held),
        'String isolated and its current proved zero with a rated meter: re-mate the long leads there.',
        `Still held? Swap unit ${held[0]?.position ?? ''} for a spare. This page watches for the change.`,
      ];
    }
    case 'not_shutting_down':
      return [
        'Keep everybody away from the array and its home run: treat them as live.',
        METER,
        'Look for a transmitter next door that still sends, and check the as-built.',
      ];
    case 'positions_unknown':
      return [
        'Check that the keep-alive reaches the string: is its transmitter on?',
        'String isolated: measure its open-circuit voltage, then halve the string to find the unit.',
      ];
    case 'unexplained':
      return [
        METER,
        'Compare the as-built with the roof: a module wired in without its unit, or a string on another input.',
      ];
    case 'unconfirmed':
      return [METER, 'Until that shows otherwise, treat the string as live.'];
    case 'unheard': {
      const missing = unitsWhere(string, (s) => s.state === 'unheard');
      return [
        missing.length === string.counts.units
          ? 'Is its gateway on and listening, and is there snow or shade on the modules?'
          : walkTo(missing),
        'Compare the serials on the roof with the as-built.',
      ];
    }
    case 'silent':
      return [
        'See whether other strings of the same gateway are silent too: then it is the gateway.',
        walkTo(unitsWhere(string, (s) => s.state === 'silent')),
      ];
    case 'low':
      return [
        'Compare with yesterday and with the week below: shade comes at the same sun, a bypassed module stays.',
      ];
    case 'unsteady':
      return [walkTo(unitsWhere(string, (s) => s.verdict === 'flapping' || s.verdict === 'late'))];
    case 'no_data':
      return ['Is the logger reporting, and is the string on its roster?'];
    case 'in_shutdown':
    case 'dark':
    case 'passing':
      return [];
  }
}

/** The caution that stands beside what somebody might act on. */
export function cautionOf(finding: Finding): { strong: string; rest: string } {
  const isolate =
    'Isolate, then prove with a rated meter before touching conductors. Follow local codes; this is work for licensed people.';
  switch (finding.kind) {
    case 'in_shutdown':
      return {
        strong: 'Shutdown is not isolation.',
        rest: `Each module and its leads to its unit stay at module voltage. ${isolate}`,
      };
    case 'unheard':
      return {
        strong: 'Until they have answered, units of this type pass full module voltage',
        rest: `and do not obey the initiator. Treat every string as live. ${isolate}`,
      };
    case 'dark':
      return { strong: 'Dark is not dead.', rest: `The string is live at first light. ${isolate}` };
    default:
      return { strong: 'A reading on this page is not proof of a dead circuit.', rest: isolate };
  }
}
