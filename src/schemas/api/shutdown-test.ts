import { z } from 'zod';
import type { TestResult } from '../../domain/commissioning/test-results';
import {
  CATEGORIES,
  LIGHTS,
  type Act,
  type RoundEvidence,
  type TestFacts,
  type TestPlan,
  type TestRecord,
} from '../../domain/commissioning/shutdown-test-record';
import type { TestVerdict } from '../../domain/commissioning/shutdown-test-verdict';
import { id } from './now';
import { shutdownTestFields } from '../../words/fields';

/** Shutdown tests: guided, signed, listed. Times ISO 8601 in UTC; V and s. */

export const testParams = z.strictObject({ test: z.uuid() });
export const sitesTestParams = z.strictObject({ site: z.uuid(), test: z.uuid() });

const name = (what: string) =>
  z
    .string({ error: `Enter ${what}.` })
    .trim()
    .min(2, `Enter ${what}.`)
    .max(120, shutdownTestFields.nameTooLong);
const text = (most: number) => z.string().trim().max(most, shutdownTestFields.textTooLong(most));
const day = z.iso.date({ error: shutdownTestFields.enterDay });
const volts = z
  .number({ error: shutdownTestFields.voltageRange })
  .min(-2000, shutdownTestFields.voltageRange)
  .max(2000, shutdownTestFields.voltageRange)
  .nullable();
const round = z.int().min(0).max(99);

export const instrument = z.strictObject({
  name: name(shutdownTestFields.makeAndModel),
  serial: name(shutdownTestFields.serialNumber),
  category: z.enum(CATEGORIES),
  ratedV: z
    .number({ error: shutdownTestFields.ratedRange })
    .min(50, shutdownTestFields.ratedRange)
    .max(2000, shutdownTestFields.ratedRange),
  calibratedOn: day,
  provedBefore: z.boolean(),
});

export const testPlan = z.strictObject({
  onSite: name(shutdownTestFields.personOnSite),
  operator: name(shutdownTestFields.personOperating),
  others: text(400),
  strings: z.array(id).min(1, shutdownTestFields.chooseString).max(500),
  rounds: z.array(id.nullable()).min(1, shutdownTestFields.keepRound).max(60),
  light: z.enum(LIGHTS),
  weather: text(200),
  instrument: instrument.nullable(),
});

export const act = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('planned'), plan: testPlan }),
  z.strictObject({ kind: z.literal('caution_accepted'), name: name(shutdownTestFields.yourName) }),
  z.strictObject({ kind: z.literal('round_added'), transmitter: id.nullable() }),
  z.strictObject({ kind: z.literal('watch_started'), round }),
  z.strictObject({ kind: z.literal('operated'), round }),
  z.strictObject({ kind: z.literal('operated_withdrawn'), round }),
  z.strictObject({
    kind: z.literal('reading'),
    round,
    string: id,
    moment: z.enum(['before', 'after']),
    afterS: z
      .number()
      .min(0, shutdownTestFields.secondsRange)
      .max(7200, shutdownTestFields.secondsRange)
      .nullable(),
    secondsFrom: z.enum(['clock', 'typed']),
    atInverterEnd: z.boolean(),
    voltages: z.strictObject({
      positiveToNegativeV: volts,
      positiveToEarthV: volts,
      negativeToEarthV: volts,
    }),
    note: text(400),
  }),
  z.strictObject({
    kind: z.literal('reading_struck'),
    reading: z.uuid(),
    reason: name(shutdownTestFields.whyStruck),
  }),
  z.strictObject({ kind: z.literal('released'), round }),
  z.strictObject({ kind: z.literal('round_ended'), round }),
  z.strictObject({ kind: z.literal('proved_after'), proved: z.boolean() }),
  z.strictObject({ kind: z.literal('remark'), text: text(1000).min(1, shutdownTestFields.typeSomething) }),
]) satisfies z.ZodType<Act>;

/** Acts carry ids made on the phone: sent twice they count once. */
export const sentAct = z.strictObject({ id: z.uuid(), at: z.iso.datetime(), act });
export type SentAct = z.infer<typeof sentAct>;
export const actsBody = z.strictObject({ acts: z.array(sentAct).min(1).max(200) });

export const startBody = z.strictObject({
  zone: id,
  /** A signed test whose open strings are tested again. */
  follows: id.optional(),
});
export type StartTest = z.infer<typeof startBody>;

export const endBody = z.strictObject({
  reason: z
    .string({ error: shutdownTestFields.sayWhyEnded })
    .trim()
    .min(3, shutdownTestFields.sayWhyEnded)
    .max(2000, shutdownTestFields.reasonTooLong),
});

export const signBody = z.strictObject({
  password: z
    .string({ error: shutdownTestFields.enterPassword })
    .min(1, shutdownTestFields.enterPassword)
    .max(1000),
  /** Of what the page showed: what has changed since is not signed unseen. */
  fingerprint: z.string().regex(/^[0-9a-f]{64}$/, shutdownTestFields.reload),
});
export type SignTest = z.infer<typeof signBody>;

export interface TestLink {
  test: string;
  at: string;
}
/** What is signed, whole; the fingerprint is taken over it. */
export interface SignedTest {
  version: 1;
  test: string;
  facts: TestFacts;
  record: TestRecord;
  evidence: RoundEvidence[];
  verdict: TestVerdict;
  follows: TestLink | null;
  signature: { name: string; role: string; at: string };
}
/** Whether the page can watch now, and why not. */
export interface Watch {
  canWatch: boolean;
  words: string;
  newestAt: string | null;
  /** In force in the zone or at its transmitters already, other than released. */
  inForce: { where: string; since: string }[];
}
export interface ShutdownTestPage {
  at: string;
  id: string;
  site: { id: string; name: string; place: string; timeZone: string };
  state: 'draft' | 'ended';
  startedAt: string;
  startedBy: string;
  ended: { at: string; by: string; reason: string } | null;
  follows: TestLink | null;
  /** What the test that this one repeats suggests: its people and instrument, and the strings that it left open. */
  suggested: TestPlan | null;
  facts: TestFacts;
  record: TestRecord;
  evidence: RoundEvidence[];
  verdict: TestVerdict;
  watch: Watch;
  /** Of the strings planned (before that: of the zone), units that pass until they answer the roll call. */
  unheard: { unheard: number; units: number };
  /** Of what would be signed now, less name and time. */
  fingerprint: string;
  /** Other people who wrote to this test in the last half hour. */
  others: { name: string; at: string }[];
}
export interface ShutdownTestReport {
  at: string;
  id: string;
  site: { id: string; name: string; place: string; timeZone: string };
  /** Null: recorded before tests were signed here; only what `earlier` says is known. */
  record: SignedTest | null;
  earlier: {
    at: string;
    zone: string | null;
    madeBy: string;
    result: TestResult;
    strings: number;
    readings: { string: string; afterS: number | null; volts: (number | null)[] }[];
  } | null;
  signature: SignedTest['signature'] | null;
  fingerprint: string | null;
  recomputed: string | null;
  matches: boolean;
  supersededBy: TestLink | null;
  follows: TestLink | null;
  /** Reports of the test's minutes that came after the signature: they change nothing. */
  late: { reports: number; strings: string[] };
}

export interface TestRow {
  id: string;
  zone: string;
  state: 'signed' | 'draft' | 'ended';
  /** Of the signature; of the start where none was given. */
  at: string;
  by: string;
  result: TestResult | null;
  strings: number;
  failed: number;
  superseded: boolean;
  carried: number;
  reason: string;
  fingerprint: string;
}
export interface ZoneStanding {
  zone: { id: string; name: string };
  initiator: string;
  initiatorPlace: string;
  strings: number;
  untested: string[];
  test: { ref: string; at: string; result: TestResult; signedBy: string } | null;
  /** Worst over its strings in force; null: nothing is known of any. */
  result: TestResult | null;
  draft: { ref: string; startedAt: string; startedBy: string } | null;
}
export interface ShutdownTestList {
  at: string;
  site: { id: string; name: string; place: string; timeZone: string };
  zones: ZoneStanding[];
  tests: TestRow[];
}

export const testListView = z.object({
  q: z.string().max(80).catch(''),
  zone: z.string().max(80).catch(''),
  show: z.enum(['in_force', 'all', 'superseded', 'unsigned']).catch('in_force'),
  sort: z.enum(['at', 'zone', 'result', 'by']).catch('at'),
  order: z.enum(['up', 'down']).catch('down'),
});
export type TestListView = z.infer<typeof testListView>;
