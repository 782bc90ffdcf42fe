import { commissioningStepSaid } from '../../words/domain-commissioning-steps';

/**
 * The steps from as-built to handover, what stands of each and what blocks it. A gap that a manager has accepted by
 * name no longer blocks, and stays visible. Pure counting over what is recorded; it judges no string.
 */
export const STEPS = [
  'as_built',
  'install_checks',
  'meter_readings',
  'roll_call',
  'shutdown_test',
  'handover',
] as const;
export type StepKey = (typeof STEPS)[number];

export interface StringFacts {
  name: string;
  /** Units that answer no roll call. */
  shutdownOnly: boolean;
  slots: number;
  placed: number;
  /** Units that can answer, and that have. */
  roster: number;
  heard: number;
  signedOff: boolean;
  /** Signed, and recorded anew since. */
  signOffStale: boolean;
  checksRecorded: number;
  /** Names of newest checks that are failed. */
  failedChecks: readonly string[];
  /** Newest reading + to −, outcome as judged when it was taken; null: none. */
  reading: 'as_expected' | 'finding' | 'cant_tell' | 'proves_nothing' | null;
}

export interface ZoneFacts {
  name: string;
  /** Worst result in force over its strings; null: no string has one. */
  test: 'passed' | 'failed' | 'consistent' | 'not_witnessed' | null;
  /** Strings without a result in force. */
  untested: readonly string[];
  /** A test is begun and neither signed nor ended. */
  underTest?: boolean;
}

export interface CommissioningFacts {
  stage: 'commissioning' | 'operating';
  strings: readonly StringFacts[];
  zones: readonly ZoneFacts[];
  /** Heard at the site and on no slot. */
  heardUnknown: number;
  rollCallRunning: boolean;
  rollCallStarted: boolean;
  /** `none`: no rapid shutdown is asked of this site by its rule set. */
  ruleSet: string;
  /** Gaps that a manager has accepted: their keys. */
  accepted: readonly string[];
  packs: number;
}

/** One point that keeps a step from being done. */
export interface Gap {
  /** Stays the same while the point does: what is accepted is accepted by it. */
  key: string;
  words: string;
  accepted: boolean;
}

export interface Step {
  key: StepKey;
  state: 'done' | 'under_way' | 'not_started';
  /** What stands, in few words. */
  words: string;
  gaps: Gap[];
}

const total = (strings: readonly StringFacts[], of: (s: StringFacts) => number): number =>
  strings.reduce((sum, s) => sum + of(s), 0);

interface Draft {
  state: Step['state'];
  words: string;
  gaps: { key: string; words: string }[];
}

function asBuilt({ strings, zones }: CommissioningFacts): Draft {
  const said = commissioningStepSaid.asBuilt;
  const slots = total(strings, (s) => s.slots);
  const placed = total(strings, (s) => s.placed);
  const gaps: Draft['gaps'] = [];
  if (strings.length === 0) gaps.push({ key: 'no_strings', words: said.noString });
  for (const s of strings)
    if (s.placed < s.slots)
      gaps.push({
        key: `serials:${s.name}`,
        words: said.noSerial(s.name, s.slots - s.placed),
      });
  if (zones.length === 0) gaps.push({ key: 'no_zone', words: said.noZone });
  return {
    state: strings.length === 0 ? 'not_started' : gaps.length === 0 ? 'done' : 'under_way',
    words:
      strings.length === 0
        ? said.nothing
        : placed === slots
          ? said.whole(slots, strings.length)
          : said.part(placed, slots, strings.length),
    gaps,
  };
}

function installChecks({ strings }: CommissioningFacts): Draft {
  const said = commissioningStepSaid.installChecks;
  const signed = strings.filter((s) => s.signedOff && !s.signOffStale);
  const begun = strings.some((s) => s.checksRecorded > 0);
  const gaps: Draft['gaps'] = [];
  for (const s of strings) {
    if (s.failedChecks.length > 0)
      gaps.push({ key: `failed:${s.name}`, words: said.failed(s.name, s.failedChecks) });
    else if (s.signedOff && s.signOffStale)
      gaps.push({
        key: `stale:${s.name}`,
        words: said.stale(s.name),
      });
    else if (!s.signedOff) gaps.push({ key: `unsigned:${s.name}`, words: said.unsigned(s.name) });
  }
  return {
    state: !begun ? 'not_started' : gaps.length === 0 && strings.length > 0 ? 'done' : 'under_way',
    words: begun ? said.signed(signed.length, strings.length) : commissioningStepSaid.notStarted,
    gaps,
  };
}

function meterReadings({ strings }: CommissioningFacts): Draft {
  const said = commissioningStepSaid.meterReadings;
  const expected = strings.filter((s) => s.reading === 'as_expected');
  const begun = strings.some((s) => s.reading !== null);
  const gaps = strings.flatMap((s) => {
    if (s.reading === 'as_expected') return [];
    return s.reading === null
      ? [{ key: `unread:${s.name}`, words: said.unread(s.name) }]
      : [{ key: `reading:${s.name}`, words: said[s.reading](s.name) }];
  });
  return {
    state: !begun ? 'not_started' : gaps.length === 0 ? 'done' : 'under_way',
    words: begun ? said.expected(expected.length, strings.length) : commissioningStepSaid.notStarted,
    gaps,
  };
}

function rollCall(facts: CommissioningFacts): Draft | null {
  const said = commissioningStepSaid.rollCall;
  const answering = facts.strings.filter((s) => !s.shutdownOnly);
  if (answering.length === 0) return null; // nothing here can answer
  const roster = total(answering, (s) => s.roster);
  const heard = total(answering, (s) => s.heard);
  const gaps: Draft['gaps'] = answering
    .filter((s) => s.heard < s.roster)
    .map((s) => ({
      key: `unheard:${s.name}`,
      words: said.unheard(s.name, s.roster - s.heard),
    }));
  if (facts.heardUnknown > 0)
    gaps.push({
      key: 'heard_unknown',
      words: said.unknown(facts.heardUnknown),
    });
  const begun = facts.rollCallStarted || heard > 0;
  return {
    state: !begun ? 'not_started' : gaps.length === 0 && roster > 0 ? 'done' : 'under_way',
    words: begun ? said.heard(heard, roster) : commissioningStepSaid.notStarted,
    gaps,
  };
}

function shutdownTest({ zones, ruleSet }: CommissioningFacts): Draft {
  const said = commissioningStepSaid.shutdownTest;
  if (ruleSet === 'none' && zones.every((z) => z.test === null))
    return { state: 'done', words: said.notAsked, gaps: [] };
  const passed = zones.filter((z) => z.test === 'passed' && z.untested.length === 0);
  const gaps = zones.flatMap((z) => {
    if (z.test === null) return [{ key: `untested:${z.name}`, words: said.unsigned(z.name) }];
    const open: Draft['gaps'] = [];
    if (z.test !== 'passed') open.push({ key: `test:${z.name}`, words: said[z.test](z.name) });
    if (z.untested.length > 0)
      open.push({
        key: `untested:${z.name}`,
        words: said.unsignedStrings(z.name, z.untested),
      });
    return open;
  });
  const begun = zones.some((z) => z.test !== null);
  const underTest = zones.filter((z) => z.underTest).map((z) => z.name);
  return {
    state: !begun && underTest.length === 0 ? 'not_started' : gaps.length === 0 ? 'done' : 'under_way',
    words: [
      ...(begun ? [said.passed(passed.length, zones.length)] : []),
      ...(underTest.length > 0 ? [said.underWay(underTest)] : []),
      ...(!begun && underTest.length === 0 ? [commissioningStepSaid.notStarted] : []),
    ].join('; '),
    gaps,
  };
}

function handover({ packs, stage }: CommissioningFacts): Draft {
  return {
    state: stage === 'operating' && packs > 0 ? 'done' : packs > 0 ? 'under_way' : 'not_started',
    words:
      packs === 0 ? commissioningStepSaid.handover.notMade : commissioningStepSaid.handover.version(packs),
    gaps: [],
  };
}

/** All steps in their order; the roll call is left out where no unit can answer one. */
export function commissioningSteps(facts: CommissioningFacts): Step[] {
  const accepted = new Set(facts.accepted);
  const drafts: readonly (readonly [StepKey, Draft | null])[] = [
    ['as_built', asBuilt(facts)],
    ['install_checks', installChecks(facts)],
    ['meter_readings', meterReadings(facts)],
    ['roll_call', rollCall(facts)],
    ['shutdown_test', shutdownTest(facts)],
    ['handover', handover(facts)],
  ];
  return drafts.flatMap(([key, draft]) => {
    if (!draft) return [];
    const gaps = draft.gaps.map((gap) => ({
      key: `${key}/${gap.key}`,
      words: gap.words,
      accepted: accepted.has(`${key}/${gap.key}`),
    }));
    const settled = gaps.length > 0 && gaps.every((gap) => gap.accepted);
    return [{ key, state: settled ? 'done' : draft.state, words: draft.words, gaps }];
  });
}

/** What still blocks the handover: gaps of the steps before it that nobody has accepted. */
export const openGaps = (steps: readonly Pick<Step, 'key' | 'gaps'>[]): Gap[] =>
  steps.filter((s) => s.key !== 'handover').flatMap((s) => s.gaps.filter((gap) => !gap.accepted));

/** The step that is worked on: the first that is not done. */
export const currentStep = <S extends Pick<Step, 'state'>>(steps: readonly S[]): S | undefined =>
  steps.find((s) => s.state !== 'done');
