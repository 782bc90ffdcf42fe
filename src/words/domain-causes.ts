import type { Mode } from '../domain/causes/candidates';
import type { CauseVerdict, PartKind } from '../domain/causes/site';
import type { FindingEvidence } from '../domain/verdicts/memory';
import { countAtStart } from '../drawings/numbers';
import { capital, counted, listedUpTo } from './domain-counts';
import { isOne } from './language';

/** What causes say of themselves: headings, what was compared, what else it could be. */

const KINDS: Record<PartKind, string> = {
  unit: 'unit',
  string: 'string',
  transmitter: 'transmitter',
  gateway: 'gateway',
  input: 'input',
  inverter: 'inverter',
  logger: 'logger',
  zone: 'zone',
  site: 'site',
};
/** A part once by kind and name: names often begin with their kind ("Gateway 3, laundry"). */
const named = (kind: PartKind, name: string): string =>
  name.trim().toLowerCase().startsWith(KINDS[kind]) ? name.trim() : `${KINDS[kind]} ${name.trim()}`;
/** The same where a sentence begins with it. */
const Named = (kind: PartKind, name: string): string => capital(named(kind, name));

const units = (n: number): string => counted(n, 'unit');
const strings = (n: number): string => counted(n, 'string');
const inputs = (n: number): string => counted(n, 'input');

const DOES: Record<CauseVerdict, readonly [one: string, many: string]> = {
  stuck: ['is stuck in shutdown', 'are stuck in shutdown'],
  not_shutting_down: ['does not shut down', 'do not shut down'],
  unconfirmed: ['has not shown that it shut down', 'have not shown that they shut down'],
  silent: ['is silent', 'are silent'],
};
const does = (verdict: CauseVerdict, n: number): string => DOES[verdict][isOne(n) ? 0 : 1];

const SHOWN: Record<CauseVerdict, string> = {
  stuck: 'in shutdown while released',
  not_shutting_down: 'passing past the time limit',
  unconfirmed: 'without a sign of having followed',
  silent: 'silent for three report intervals or more',
};

/** Of whom a heading speaks; `some`: only the string's voltage tells how many. */
export type CauseSubject =
  | { is: 'unit'; position: number; string: string }
  | { is: 'some'; units: number; ofN: number; string: string }
  | { is: 'string'; string: string }
  | { is: 'strings'; strings: number }
  | { is: 'units'; units: number };

function who(subject: CauseSubject): string {
  switch (subject.is) {
    case 'unit':
      return `Unit ${subject.position} of ${subject.string}`;
    case 'some':
      return `${subject.units} of ${subject.ofN} units of ${subject.string}`;
    case 'string':
      return `String ${subject.string}`;
    case 'strings':
      return strings(subject.strings);
    case 'units':
      return units(subject.units);
  }
}

/** Names of places that have none of their own. Part names are stored with their cause. */
export const causePlaces = {
  input: (inverter: string, input: number) => `${inverter} input ${input}`,
  position: (string: string, position: number) => `${string} position ${position}`,
};

/** Headings. `n` counts units where nothing else is said. */
export const causeHeadlines = {
  /** How a heading counts units: what is left of them is put in its place. */
  units,
  /** @param n how many do it */
  alone: (subject: CauseSubject, verdict: CauseVerdict, n: number) => `${who(subject)} ${does(verdict, n)}`,
  transmitterNotHeard: (name: string, n: number) =>
    `${Named('transmitter', name)} is not heard by ${units(n)}`,
  transmitterTooWeak: (name: string, n: number) =>
    `${Named('transmitter', name)} is too weak for ${units(n)}`,
  keepAliveTooWeak: (of: string, n: number) => `The keep-alive is too weak for ${units(n)} of ${of}`,
  transmitterSends: (name: string, verdict: CauseVerdict, n: number) =>
    `${Named('transmitter', name)} seems to keep sending: ${units(n)} ${does(verdict, n)}`,
  hearANeighbour: (name: string, verdict: CauseVerdict, n: number, of: readonly string[]) =>
    `${units(n)} of ${listedUpTo(3, of)} seem to hear ${named('transmitter', name)} and ${does(verdict, 2)}`,
  gatewaySilent: (name: string, n: number) =>
    `${Named('gateway', name)} has fallen silent, and ${units(n)} with it`,
  throughGateway: (name: string, verdict: CauseVerdict, n: number) =>
    `${units(n)} reached through ${named('gateway', name)} ${does(verdict, n)}`,
  ofLogger: (name: string, verdict: CauseVerdict, n: number) =>
    `${units(n)} of ${named('logger', name)} ${does(verdict, n)}`,
  loggerReportsNothing: (name: string, n: number) =>
    `${Named('logger', name)} reports nothing of ${units(n)}`,
  allOf: (kind: PartKind, name: string, verdict: CauseVerdict, n: number) =>
    `All of ${named(kind, name)}: ${units(n)} ${does(verdict, n)}`,
  allOn: (kind: PartKind, name: string, verdict: CauseVerdict, n: number) =>
    `All on ${named(kind, name)}: ${units(n)} ${does(verdict, n)}`,
  inputAtVoltage: (name: string, ofStrings: number) =>
    `${name} stays at voltage: ${strings(ofStrings)} may not shut down`,
  /** Units that share nothing; begins the sentence. */
  severalAlone: (n: number, verdict: CauseVerdict) => `${countAtStart(n)} units ${does(verdict, n)}`,
  wholeSite: (verdict: CauseVerdict, n: number) => `The whole site: ${units(n)} ${does(verdict, n)}`,
  canNotSay: (zone: string, n: number) =>
    `${units(n)} in ${named('zone', zone)} can not say whether they shut down`,
  tooDark: (zone: string, n: number) =>
    `It is too dark for ${units(n)} in ${named('zone', zone)} to say whether they shut down`,
  notHeardYet: (zone: string, n: number) =>
    `${units(n)} in ${named('zone', zone)} have not answered the roll call and may not obey the initiator`,
};

/** What was compared. */
export const causeEvidence = {
  itAlone: (neighbours: number, string: string, verdict: CauseVerdict) =>
    `Its ${counted(neighbours, 'neighbour')} in ${string} ${isOne(neighbours) ? 'does' : 'do'} as expected; it alone is ${SHOWN[verdict]}.`,
  ofThoseThatShare: (shown: number, of: number, verdict: CauseVerdict, ofStrings: readonly string[]) =>
    `${shown} of ${of} units that share it are ${SHOWN[verdict]}, in ${listedUpTo(3, ofStrings)}.`,
  voltage: (input: string, string: string, e: FindingEvidence) => {
    const where = e.scope === 'input' ? `${input}, which strings share,` : `The input of ${string}`;
    const expected = e.expectedV === null ? '' : `, ${e.expectedV.toFixed(1)} V expected`;
    return `${where} stands at ${e.measuredV.toFixed(1)} V${expected}; threshold ${e.thresholdV.toFixed(0)} V (${e.thresholdSource}).`;
  },
  itIsLive: 'While it is silent, a shutdown can’t be confirmed: treat it as live.',
  theyAreLive: 'While they are silent, a shutdown can’t be confirmed: treat them as live.',
  neighbourSends: (transmitter: string) =>
    `Their own transmitters are off; ${named('transmitter', transmitter)}, which they should not hear, still sends.`,
  currentOnItsInput:
    'Current flows on the input that it feeds: it is the reports that are missing, not the power.',
  currentOnTheirInput:
    'Current flows on the input that they feed: it is the reports that are missing, not the power.',
  noCurrentOnItsInput: 'No current flows on the input that it feeds.',
  noCurrentOnTheirInput: 'No current flows on the input that they feed.',
  currentOnSome: (alive: number, of: number) =>
    `Current flows on ${alive} of ${inputs(of)} that they feed: it is the reports that are missing, not the power.`,
  currentOnNone: (of: number) => `No current flows on the ${inputs(of)} that they feed.`,
};

/** A rival explanation, by the part that would stand behind it. */
export const causeRivals: Record<
  Mode,
  (part: { kind: PartKind; name: string }, verdict: CauseVerdict) => string
> = {
  unit: () => 'Each unit on its own',
  string: ({ name }) => `Something that all units of ${named('string', name)} share, its home run for one`,
  weak_signal: ({ kind, name }) => `Noise on, or too long a run of, the conductors of ${named(kind, name)}`,
  transmitter_lost: ({ name }) => `${Named('transmitter', name)} is off or defective`,
  transmitter_on: ({ name }) => `${Named('transmitter', name)} keeps sending`,
  cross_talk: ({ name }) => `The units hear ${named('transmitter', name)}`,
  gateway: ({ name }) => Named('gateway', name),
  logger: ({ name }) => `${Named('logger', name)} or its connection`,
  input: ({ name }) => `The wiring of ${name}`,
  inverter: ({ name }) => `${Named('inverter', name)} or what it feeds`,
  zone: ({ name }, verdict) =>
    verdict === 'stuck'
      ? `${Named('zone', name)} is not released in truth`
      : `The command for ${named('zone', name)}`,
  site: () => 'The power or the connection of the whole site',
  tells_nothing: ({ name }) => `Nothing in ${named('zone', name)} can report`,
  night: () => 'Too little light',
  not_heard_yet: () => 'The roll call is not complete',
};

/** What may stand behind a cause besides its rivals. */
export const causeCouldBe: Record<Mode, readonly string[]> = {
  unit: [
    'The unit is defective',
    'A loose connector at the unit',
    'The unit sits elsewhere than the as-built says',
  ],
  string: [
    'An open connector or fuse in the home run',
    'The string sits on another input than the as-built says',
  ],
  weak_signal: ['Noise from an inverter', 'A long or looped conductor', 'A connector going bad'],
  transmitter_lost: [
    "The transmitter's supply or its coupling to the conductors",
    'Its zone is not released in truth',
  ],
  transmitter_on: ['The command in force was reported wrongly', "A neighbour's transmitter is heard"],
  cross_talk: [
    'Conductors of two systems run side by side',
    'The string is coupled to the wrong transmitter',
  ],
  gateway: ["The gateway's supply", 'Interference on its radio channel'],
  logger: ['Its supply or its network', 'The initiator cuts its supply too'],
  input: ["The inverter's capacitors hold it up", 'Another source feeds this input'],
  inverter: ['The inverter is switched off'],
  zone: ['The command in force was reported wrongly', 'The initiator does not act on the zone'],
  site: ['A power cut', 'The network of the site'],
  tells_nothing: ['Only a rated instrument at the home run can show it'],
  night: ['Snow on the modules', 'Judged again at sunrise'],
  not_heard_yet: ['A unit that has not answered passes full voltage by its type'],
};
export const aNeighbourIsHeard = "A keep-alive from a neighbour's transmitter is heard";
