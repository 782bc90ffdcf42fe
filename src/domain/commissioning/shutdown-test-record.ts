import { actRefused } from '../../words/domain-shutdown-test-record';
import type { UnitKind } from '../equipment/unit-type';
import type { InForce } from '../verdicts/codes';
import type { RuleSet } from '../verdicts/context';

/**
 * What is written down during a shutdown test: acts of people, one after the other and never changed, and what they
 * amount to. Times are ISO 8601 in UTC, `…S` seconds, voltages V.
 */

export const LIGHTS = ['bright', 'dull', 'snow', 'night'] as const;
export type TestLight = (typeof LIGHTS)[number];
export const CATEGORIES = ['CAT IV', 'CAT III', 'CAT II', 'none'] as const;

/** The meter, as a person read it off its case and its certificate. */
export interface Instrument {
  /** Make and model. */
  name: string;
  serial: string;
  /** Measurement category (IEC 61010) printed at the input. */
  category: (typeof CATEGORIES)[number];
  /** V, of that category. */
  ratedV: number;
  /** Calendar day of the newest calibration. */
  calibratedOn: string;
  /** Shown to work on a known source before the test. */
  provedBefore: boolean;
}

export interface TestPlan {
  onSite: string;
  operator: string;
  others: string;
  /** Public refs of the strings under test. */
  strings: string[];
  /** One part of the test each: null = the initiator; else the ref of the one transmitter that is taken off alone. */
  rounds: (string | null)[];
  light: TestLight;
  weather: string;
  instrument: Instrument | null;
}

/** Voltages of one string at the inverter's end of its home run; null: not read. */
export interface Voltages {
  positiveToNegativeV: number | null;
  positiveToEarthV: number | null;
  negativeToEarthV: number | null;
}

export type Act =
  | { kind: 'planned'; plan: TestPlan }
  | { kind: 'caution_accepted'; name: string }
  | { kind: 'round_added'; transmitter: string | null }
  | { kind: 'watch_started'; round: number }
  | { kind: 'operated'; round: number }
  | { kind: 'operated_withdrawn'; round: number }
  | {
      kind: 'reading';
      round: number;
      string: string;
      moment: 'before' | 'after';
      /** Seconds from "Initiator operated now" to the reading; null before the command. */
      afterS: number | null;
      /** Whether the page's clock gave the seconds or a person typed them. */
      secondsFrom: 'clock' | 'typed';
      atInverterEnd: boolean;
      voltages: Voltages;
      note: string;
    }
  | { kind: 'reading_struck'; reading: string; reason: string }
  | { kind: 'released'; round: number }
  | { kind: 'round_ended'; round: number }
  | { kind: 'proved_after'; proved: boolean }
  | { kind: 'remark'; text: string };
export type ActKind = Act['kind'];

/** An act as it is kept: by whom, when by the phone's clock and when it reached the server. */
export interface KeptAct {
  id: string;
  at: string;
  recordedAt: string;
  person: string;
  act: Act;
}

export interface TestReading {
  id: string;
  string: string;
  moment: 'before' | 'after';
  afterS: number | null;
  secondsFrom: 'clock' | 'typed';
  atInverterEnd: boolean;
  voltages: Voltages;
  note: string;
  at: string;
  by: string;
  struck: { reason: string; by: string } | null;
}
export interface Stamp {
  at: string;
  recordedAt: string;
  by: string;
}
export interface TestRound {
  /** null: the initiator; else the ref of the transmitter taken off alone. */
  transmitter: string | null;
  watchStarted: Stamp | null;
  /** "Initiator operated now", as a person tapped it. */
  operated: Stamp | null;
  released: Stamp | null;
  ended: Stamp | null;
  readings: TestReading[];
}
export interface TestRecord {
  plan: TestPlan | null;
  planned: Stamp | null;
  caution: (Stamp & { name: string }) | null;
  rounds: TestRound[];
  provedAfter: boolean | null;
  remarks: (Stamp & { text: string })[];
  /** Id of the newest act. */
  newest: string | null;
  people: string[];
}

const freshRound = (transmitter: string | null): TestRound => ({
  transmitter,
  watchStarted: null,
  operated: null,
  released: null,
  ended: null,
  readings: [],
});

/**
 * What the acts amount to, in the order in which they reached the server. What makes no sense (a reading of a round
 * that is not planned) is left out: `faultOfAct` keeps it from being written.
 */
export function recordOf(acts: readonly KeptAct[]): TestRecord {
  const record: TestRecord = {
    plan: null,
    planned: null,
    caution: null,
    rounds: [],
    provedAfter: null,
    remarks: [],
    newest: acts.at(-1)?.id ?? null,
    people: [...new Set(acts.map((a) => a.person))],
  };
  for (const kept of acts) take(record, kept);
  return record;
}

/** The record with further acts on top: those that wait on a phone. */
export function withActs(record: TestRecord, acts: readonly KeptAct[]): TestRecord {
  if (acts.length === 0) return record;
  const next = structuredClone(record);
  for (const kept of acts) {
    take(next, kept);
    next.newest = kept.id;
  }
  return next;
}

function take(record: TestRecord, { id, at, recordedAt, person, act }: KeptAct): void {
  const stamp = { at, recordedAt, by: person };
  switch (act.kind) {
    case 'planned':
      record.plan = act.plan;
      record.planned = stamp;
      // rounds that have begun stay as they are
      record.rounds = [
        ...record.rounds.filter((r) => r.watchStarted !== null || r.readings.length > 0),
        ...act.plan.rounds.map(freshRound),
      ].filter(
        (r, i, all) =>
          r.watchStarted !== null || all.findIndex((other) => other.transmitter === r.transmitter) === i,
      );
      return;
    case 'caution_accepted':
      record.caution = { ...stamp, name: act.name };
      return;
    case 'round_added':
      record.rounds.push(freshRound(act.transmitter));
      return;
    case 'proved_after':
      record.provedAfter = act.proved;
      return;
    case 'remark':
      record.remarks.push({ ...stamp, text: act.text });
      return;
    case 'reading_struck':
      for (const round of record.rounds)
        for (const reading of round.readings)
          if (reading.id === act.reading) reading.struck = { reason: act.reason, by: person };
      return;
    case 'reading': {
      const { kind: _, round, ...reading } = act;
      const readings = record.rounds[round]?.readings;
      // stored already, and still waiting on a phone that has not heard so
      if (readings?.some((r) => r.id === id)) return;
      readings?.push({ ...reading, id, at, by: person, struck: null });
      return;
    }
    default: {
      const round = record.rounds[act.round];
      if (!round) return;
      if (act.kind === 'watch_started') round.watchStarted ??= stamp;
      else if (act.kind === 'operated') round.operated ??= stamp;
      else if (act.kind === 'operated_withdrawn') round.operated = null;
      else if (act.kind === 'released') round.released ??= stamp;
      else round.ended ??= stamp;
    }
  }
}

/** The round that is under way: watched and not ended. Undefined: none. */
export const openRound = (record: TestRecord): number | undefined => {
  const index = record.rounds.findIndex((r) => r.watchStarted !== null && r.ended === null);
  return index < 0 ? undefined : index;
};
/** The round that comes next; undefined: all are done. */
export const nextRound = (record: TestRecord): number | undefined => {
  const index = record.rounds.findIndex((r) => r.watchStarted === null);
  return index < 0 ? undefined : index;
};

/** Why an act makes no sense as the test stands, with the remedy; null: it does. */
export function faultOfAct(record: TestRecord, act: Act): string | null {
  if (act.kind === 'planned') {
    if (act.plan.strings.length === 0) return actRefused.noString;
    if (act.plan.rounds.length === 0) return actRefused.noRound;
    return null;
  }
  if (record.plan === null) return actRefused.notPlanned;
  if (act.kind === 'caution_accepted' || act.kind === 'remark' || act.kind === 'proved_after') return null;
  if (record.caution === null) return actRefused.cautionFirst;
  if (act.kind === 'reading_struck')
    return record.rounds.some((r) => r.readings.some((x) => x.id === act.reading))
      ? null
      : actRefused.noSuchReading;
  if (act.kind === 'round_added') return null;
  const round = record.rounds[act.round];
  if (!round) return actRefused.noSuchRound;
  if (act.kind === 'watch_started') {
    const open = openRound(record);
    return open !== undefined && open !== act.round ? actRefused.endRoundBefore : null;
  }
  if (round.watchStarted === null) return actRefused.watchFirst;
  if (act.kind === 'reading') {
    if (!record.plan.strings.includes(act.string)) return actRefused.stringNotTested;
    if (act.moment === 'after' && act.afterS === null) return actRefused.sayHowLong;
    if (Object.values(act.voltages).every((v) => v === null)) return actRefused.typeVoltage;
    return null;
  }
  if (act.kind === 'operated') return round.ended === null ? null : actRefused.roundOver;
  if (act.kind === 'operated_withdrawn') return round.released === null ? null : actRefused.releasedAlready;
  return null;
}

/** The part of the as-built that a test speaks of, as it was then. */
export interface TestedPart {
  id: string;
  name: string;
  kind: UnitKind;
  /** In slot order; null: no unit there. */
  serials: (string | null)[];
  homeRunLeavesArray: boolean;
  input: { name: string; strings: number };
  /** Refs of the transmitters that it hears, as drawn. */
  transmitters: string[];
  /** V let through by all its units in shutdown, by the type entered. */
  shutdownV: { nominal: number; max: number };
  /** V above which a unit's output can't be in shutdown. */
  passingFromV: number;
}
export interface TestFacts {
  site: { id: string; name: string; timeZone: string };
  zone: { id: string; name: string };
  initiator: { name: string; place: string };
  ruleSet: RuleSet;
  reportIntervalS: number;
  transmitters: { id: string; name: string }[];
  strings: TestedPart[];
}

/** A command as the logger reported it. */
export interface ReportedCommand {
  inForce: InForce;
  where: string;
  since: string;
  by: string;
}
export interface EvidenceTrace {
  measuringPoint: 'home_run' | 'input' | 'unit_sum';
  accuracyV: number;
  startedAt: string;
  /** One a second. */
  voltage: (number | null)[];
}
/** What reports show of one unit after the command. Seconds from the command: at least and at most. */
export interface UnitConduct {
  position: number;
  serial: string | null;
  followed: [number, number] | null;
  /** Last seen passing so many seconds after the command, before the release. */
  passedAtS: number | null;
  /** It was in shutdown before the command already. */
  downBefore: boolean;
  /** What it rests on. */
  basis: 'measured' | 'claim' | 'nothing';
  /** Seconds from the release to passing again. */
  returned: [number, number] | null;
  /** Still in shutdown so many seconds after the release. */
  heldAtS: number | null;
}
/** A, from which a current through an input is one, and no offset of its meter; from experience. */
export const FLOWS_A = 0.2;

export interface StringConduct {
  string: string;
  traces: EvidenceTrace[];
  units: UnitConduct[];
  /** Reports that these figures rest on. */
  reports: number;
  /** Newest voltage of its input after the time limit and before the release. */
  input: { afterS: number; voltageV: number } | null;
  /** Newest current of its input after the command and before the release; left out: not reported. */
  current?: { afterS: number; currentA: number };
  /** Highest voltage of its input in the minute before the command. */
  inputBeforeV: number | null;
  /** Sums of its units' outputs where all were reported, [seconds from the command, V], before it too. */
  sums: [number, number][];
  /** Voltages of its input likewise. */
  inputs: [number, number][];
  /** Voltage of its input after the release, newest. */
  inputAgain: { afterS: number; voltageV: number } | null;
}
export interface RoundEvidence {
  command: ReportedCommand | null;
  release: { since: string } | null;
  /** Where the seconds of reports are counted from. */
  origin: 'reported' | 'tapped' | null;
  from: string;
  to: string;
  strings: StringConduct[];
}
