import { describe, expect, it } from 'vitest';
import { UNIT_PRESETS } from '../../domain/equipment/unit-type';
import { addressOf } from '../../lib/view-in-url';
import { overlaid, withStored } from '../../lib/capture-records';
import type { Waiting } from '../../lib/capture-queue';
import type { CaptureSnapshot } from '../../schemas/api/capture';
import { mergedDraft, readDraft } from './check-draft';
import { checkRecord, readingRecord } from './records';
import { VIEW_DEFAULTS, formOf, forString, stageOf, stringAfter, typedPlaces, viewOf } from './view';
import { countAndKind, stripWords } from './words';
import { EMPTY_PHONE, type PhoneState } from '../../lib/capture-phone';
import { OPEN_LINK } from '../../lib/capture-queue';

const AT = '2026-12-01T13:48:00.000Z';
const string = (name: string): CaptureSnapshot['strings'][number] => ({
  ...{ id: `id-${name}`, name, units: 14, serials: [], unitTypeId: 'u', moduleTypeId: 'm' },
  ...{ plane: 'South', zone: 'Zone', input: { inverter: 'Inverter 1', number: 1, strings: 1 } },
  ...{ commanded: 'shutdown', heard: 0, checks: [], fingerprint: 'f', readings: [], signOff: null },
});
const SITE: CaptureSnapshot = {
  at: AT,
  person: { id: 'ada', name: 'Ada Moor', role: 'technician' },
  site: {
    ...{ id: 'site', name: 'Weirside', place: 'Weir', timeZone: 'UTC' },
    ...{ stage: 'commissioning', ruleSet: 'rapid_shutdown_30s' },
  },
  unitTypes: [
    { ...UNIT_PRESETS.shutdown_only, id: 'u', name: 'Unit', connectorIn: null, connectorOut: null },
  ],
  moduleTypes: [],
  connectors: [],
  pairs: [],
  strings: [string('B2'), string('B3')],
  limits: { photoMaxBytes: 1000 },
};
const [B2] = SITE.strings as [CaptureSnapshot['strings'][number]];
const queued = (record: ReturnType<typeof readingRecord>, number = 1): Waiting => ({
  ...record,
  ...{ number, state: 'waiting', tries: 0, notBefore: 0, problem: null, current: null },
});
const FACTS = {
  ...({ stage: 'before_energising', kind: 'positive_to_negative', light: 'bright' } as const),
  ...({ meterMode: 'high_impedance', commanded: 'shutdown', voltage: 7.8, note: '' } as const),
};

describe('the address', () => {
  it('brings everything back that was typed, and nothing that is no choice', () => {
    const view = { ...VIEW_DEFAULTS, string: 'id-B2', at: 'negative', v: '7.8', ne: '−0.1', light: 'snow' };
    const address = addressOf('/capture/site', view, VIEW_DEFAULTS);
    expect(viewOf(address.split('?')[1] ?? '')).toEqual(view);
    expect(viewOf('part=nonsense&light=dusk&v=' + '1'.repeat(200))).toEqual(VIEW_DEFAULTS);
    expect(typedPlaces(view)).toEqual(['between', 'negative']);
  });
  it('keeps light, meter and stage from string to string, and no reading', () => {
    const view = { ...VIEW_DEFAULTS, string: 'id-B2', v: '7.8', light: 'dull', draft: 'x' };
    expect(forString(view, 'id-B3')).toEqual({ ...VIEW_DEFAULTS, string: 'id-B3', light: 'dull' });
    expect(stringAfter(SITE.strings, 'id-B2')?.name).toBe('B3');
    expect(stringAfter(SITE.strings, 'id-B3')).toBeNull();
  });
});

it('asks at the stages that the type of unit has, with what is in force there', () => {
  const view = { ...VIEW_DEFAULTS, stage: 'after_roll_call' };
  expect(stageOf(view, UNIT_PRESETS.monitored).stage).toBe('after_roll_call');
  expect(stageOf(view, UNIT_PRESETS.shutdown_only)).toEqual({
    stage: 'after_keep_alive',
    stages: ['before_energising', 'after_keep_alive'],
  });
  expect(formOf(view, B2, 'shutdown_only', 'before_energising').commanded).toBe('shutdown');
  expect(countAndKind(SITE, B2).replace(/\u00a0/g, ' ')).toBe('14 units, shutdown-only');
});

describe('what waits', () => {
  const reading = queued(readingRecord({ snapshot: SITE, string: B2, ref: 'one', at: AT }, FACTS, null));
  it('stands over the snapshot for its person, until it wants a decision', () => {
    expect(overlaid(SITE, [reading]).strings[0]?.readings).toMatchObject([{ voltage: 7.8, waiting: true }]);
    expect(overlaid(SITE, [{ ...reading, state: 'conflict' }]).strings[0]?.readings).toEqual([]);
    expect(overlaid(SITE, [{ ...reading, person: 'bo' }]).strings[0]?.readings).toEqual([]);
    const later = queued(
      readingRecord({ snapshot: SITE, string: B2, ref: 'two', at: AT }, { ...FACTS, voltage: 8.4 }, 'one'),
      2,
    );
    expect(overlaid(SITE, [later, reading]).strings[0]?.readings).toMatchObject([
      { ref: 'two', voltage: 8.4 },
    ]);
  });
  it('takes the signature’s ground away until the server has said what it has', () => {
    const facts = { check: 'labels', result: 'pass', reason: '', note: '', figures: {} } as const;
    const check = checkRecord({ snapshot: SITE, string: B2, ref: 'three', at: AT }, facts, null);
    const stored = { ...check.body, recordedAt: AT, person: 'Ada Moor' } as Parameters<typeof withStored>[2];
    expect(withStored(SITE, 'check', stored).strings[0]).toMatchObject({ fingerprint: '' });
    expect(check.label).toBe('B2, Labels: passed');
  });
  it('is told in a few words, with why it does not go', () => {
    const state: PhoneState = {
      ...EMPTY_PHONE,
      ...{ ready: true, snapshot: SITE, here: { person: 'ada', name: 'Ada Moor' } },
      records: [reading, { ...reading, ref: 'x', person: 'bo' }],
    };
    const now = new Date('2026-12-01T14:10:00Z');
    expect(stripWords(state, now, 'UTC')).toMatchObject({
      age: 'As of 13:48',
      waiting: '1 waiting',
      why: '',
    });
    expect(stripWords(state, now, 'UTC').others).toContain('1 waiting from another person');
    expect(stripWords({ ...state, unreachableSince: '2026-12-01T14:02:00Z' }, now, 'UTC').why).toContain(
      'No network since 14:02',
    );
    const ended = stripWords({ ...state, link: { ...OPEN_LINK, state: 'signed_out' } }, now, 'UTC');
    expect(ended).toMatchObject({ signIn: true });
    expect(ended.why).toContain('nothing is lost');
  });
});

describe('a check that is typed', () => {
  const resistance = {
    key: 'resistance',
    kind: 'number',
    name: 'Resistance',
    unit: 'Ω',
    min: 0,
    max: 10_000,
    needed: true,
  } as const;
  const typed = (value: string, result: 'pass' | 'fail' = 'pass', reason = '') =>
    readDraft(
      'earth_continuity',
      [resistance],
      result,
      { figures: { resistance: value }, reason, note: '' },
      () => true,
    );
  it('takes a comma, names what is wrong and what would do, and wants a reason for a fail', () => {
    expect(typed('0,4').facts?.figures).toEqual({ resistance: 0.4 });
    expect(typed('').faults?.resistance).toContain('can only pass with it');
    expect(typed('much').faults?.resistance).toContain('is no number');
    expect(typed('', 'fail').faults?.reason).toContain('Say what is wrong');
    expect(typed('', 'fail', 'Loose').facts?.reason).toBe('Loose');
  });
  it('is put together with another person’s: own figures first, both notes', () => {
    expect(
      mergedDraft(
        { figures: { resistance: -0.5 }, reason: 'Loose', note: 'Rail 2' },
        { figures: { resistance: 3, other: 'x' }, reason: 'Loose', note: 'Rail 1' },
      ),
    ).toEqual({ figures: { resistance: '−0.5', other: 'x' }, reason: 'Loose', note: 'Rail 2\nRail 1' });
  });
});
