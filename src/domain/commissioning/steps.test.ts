import { describe, expect, it } from 'vitest';
import {
  commissioningSteps,
  currentStep,
  openGaps,
  type CommissioningFacts,
  type StringFacts,
  type ZoneFacts,
} from './steps';

const string = (change: Partial<StringFacts> = {}): StringFacts => ({
  name: 'B3',
  shutdownOnly: false,
  slots: 14,
  placed: 14,
  roster: 14,
  heard: 14,
  signedOff: true,
  signOffStale: false,
  checksRecorded: 12,
  failedChecks: [],
  reading: 'as_expected',
  ...change,
});
const facts = (change: Partial<CommissioningFacts> = {}): CommissioningFacts => ({
  stage: 'commissioning',
  strings: [string()],
  zones: [{ name: 'South roof', test: 'passed', untested: [] }],
  heardUnknown: 0,
  rollCallRunning: false,
  rollCallStarted: true,
  ruleSet: 'rapid_shutdown_30s',
  accepted: [],
  packs: 0,
  ...change,
});
const gapsOf = (change: Partial<CommissioningFacts>) =>
  openGaps(commissioningSteps(facts(change))).map((g) => g.key);
const withString = (change: Partial<StringFacts>) => gapsOf({ strings: [string(change)] });

describe('the steps of a site', () => {
  it('are done up to the handover when everything is recorded', () => {
    const steps = commissioningSteps(facts());
    expect(openGaps(steps)).toEqual([]);
    expect(currentStep(steps)?.key).toBe('handover');
  });

  it('of a new site have not begun', () => {
    const steps = commissioningSteps(facts({ strings: [], zones: [], rollCallStarted: false }));
    expect(steps.map((s) => s.state)).toEqual(Array<string>(5).fill('not_started'));
    expect(openGaps(steps).map((g) => g.key)).toEqual(['as_built/no_strings', 'as_built/no_zone']);
  });

  it('name each point that blocks', () => {
    expect(withString({ placed: 12 })).toEqual(['as_built/serials:B3']);
    expect(withString({ failedChecks: ['connector pair'] })).toEqual(['install_checks/failed:B3']);
    expect(withString({ signOffStale: true })).toEqual(['install_checks/stale:B3']);
    expect(withString({ signedOff: false })).toEqual(['install_checks/unsigned:B3']);
    expect(withString({ reading: null })).toEqual(['meter_readings/unread:B3']);
    expect(withString({ reading: 'cant_tell' })).toEqual(['meter_readings/reading:B3']);
    expect(withString({ reading: 'proves_nothing' })).toEqual(['meter_readings/reading:B3']);
    expect(withString({ heard: 13 })).toEqual(['roll_call/unheard:B3']);
    expect(gapsOf({ heardUnknown: 2 })).toEqual(['roll_call/heard_unknown']);
  });

  it('take telemetry alone for no pass', () => {
    for (const test of ['consistent', 'not_witnessed', 'failed'] as const)
      expect(gapsOf({ zones: [{ name: 'South roof', test, untested: [] }] })).toEqual([
        'shutdown_test/test:South roof',
      ]);
    expect(gapsOf({ zones: [{ name: 'South roof', test: null, untested: [] }] })).toEqual([
      'shutdown_test/untested:South roof',
    ]);
  });

  it('count a test that is begun and not signed as under way, and it closes no gap', () => {
    const step = (zones: ZoneFacts[]) =>
      commissioningSteps(facts({ zones })).find((s) => s.key === 'shutdown_test');
    const untested = { test: null, untested: ['B3'] };
    expect(step([{ name: 'South roof', ...untested }])).toMatchObject({
      state: 'not_started',
      words: 'not started',
    });
    const begun = { name: 'South roof', ...untested, underTest: true };
    expect(step([begun])).toMatchObject({ state: 'under_way', words: 'test of South roof under way' });
    expect(step([begun])?.gaps).toHaveLength(1);
    expect(step([begun, { name: 'Gym', test: 'passed', untested: [] }])?.words).toBe(
      '1 of 2 zones passed; test of South roof under way',
    );
  });

  it('take a test of some strings for no test of the others', () => {
    const zones = [{ name: 'South roof', test: 'passed' as const, untested: ['B4'] }];
    expect(gapsOf({ zones })).toEqual(['shutdown_test/untested:South roof']);
    expect(commissioningSteps(facts({ zones })).find((s) => s.key === 'shutdown_test')?.state).toBe(
      'under_way',
    );
  });

  it('leave the roll call out where no unit answers one', () => {
    const steps = commissioningSteps(
      facts({ strings: [string({ shutdownOnly: true, roster: 0, heard: 0 })], rollCallStarted: false }),
    );
    expect(steps.map((s) => s.key)).not.toContain('roll_call');
    expect(openGaps(steps)).toEqual([]);
  });

  it('ask for no shutdown test where the rule set asks for none', () => {
    expect(gapsOf({ ruleSet: 'none', zones: [{ name: 'South roof', test: null, untested: [] }] })).toEqual(
      [],
    );
    expect(
      gapsOf({ ruleSet: 'none', zones: [{ name: 'South roof', test: 'failed', untested: [] }] }),
    ).toHaveLength(1);
  });

  it('keep an accepted gap in view, and let it block no more', () => {
    const steps = commissioningSteps(
      facts({ strings: [string({ heard: 13 })], accepted: ['roll_call/unheard:B3'] }),
    );
    const roll = steps.find((s) => s.key === 'roll_call');
    expect(roll).toMatchObject({ state: 'done', gaps: [{ accepted: true }] });
    expect(openGaps(steps)).toEqual([]);
  });

  it('accept by name: another gap of the same step still blocks', () => {
    const strings = [string({ heard: 13 }), string({ name: 'B4', heard: 0 })];
    expect(gapsOf({ strings, accepted: ['roll_call/unheard:B3'] })).toEqual(['roll_call/unheard:B4']);
  });

  it('are handed over once a pack is made and the site operates', () => {
    const last = (change: Partial<CommissioningFacts>) => commissioningSteps(facts(change)).at(-1)?.state;
    expect(last({ packs: 1 })).toBe('under_way');
    expect(last({ packs: 1, stage: 'operating' })).toBe('done');
    expect(last({ stage: 'operating' })).toBe('not_started');
  });
});
