import { describe, expect, it } from 'vitest';
import { UNIT_PRESETS } from '../../domain/equipment/unit-type';
import { allPassed, context, H4, K6 } from '../../domain/commissioning/checks/sample-checks';
import { checkMatrix } from '../../domain/commissioning/checks/string-standing';
import { judgedNow } from '../../domain/commissioning/readings/judged-now';
import { stagesRead } from '../../domain/commissioning/readings/stages-read';
import { checksFor } from '../../domain/commissioning/checks/list';
import type { CaptureString } from '../../schemas/api/capture';
import type { DeskPage } from '../../schemas/api/checks-page';
import { readingFinding } from '../../schemas/api/readings';
import { listedReadings, readingRows, READINGS_DEFAULTS, stageShown } from './readings-rows';
import { readingsHeading, readingsSentence } from './readings-words';
import { figureText, openString } from './open-string';
import { CHECKS_DEFAULTS, counted, listedRows, rowsOf as listed } from './rows';
import { begun, filled } from './typed';
import { checksHeading, checksSentence } from './words';

const AT = '2026-11-03T10:00:00.000Z';
const unitType = {
  id: 'u',
  ...context().unitType,
  ...UNIT_PRESETS.monitored,
  connectorIn: H4.id,
  connectorOut: null,
};
const moduleType = { id: 'm', ...context().module, connector: K6.id };

type Record = CaptureString['checks'][number];
const passed = (but: (key: string) => Partial<Record> | null = () => ({})): Record[] =>
  allPassed().flatMap((c) => {
    const more = but(c.check);
    return more === null
      ? []
      : [
          {
            ref: `ref-${c.check}`,
            check: c.check,
            result: c.result,
            reason: c.reason,
            note: '',
            figures: { ...c.figures },
            at: AT,
            recordedAt: AT,
            person: 'Bram Ottersley',
            supersedes: null,
            ...more,
          },
        ];
  });
const string = (name: string, more: Partial<CaptureString> = {}): CaptureString => ({
  id: name,
  name,
  units: 14,
  serials: Array.from({ length: 14 }, (_, i) => `UN-${i}`),
  unitTypeId: 'u',
  moduleTypeId: 'm',
  plane: 'South',
  zone: 'Roof',
  input: { inverter: 'Inverter 1', number: 1, strings: 1 },
  commanded: 'unknown',
  heard: 0,
  checks: [],
  fingerprint: 'f',
  readings: [],
  signOff: null,
  ...more,
});
const signed = (stale: boolean) => ({ ref: 's', person: 'Bram Ottersley', at: AT, fingerprint: 'f', stale });
const page = (strings: CaptureString[], files: DeskPage['files'] = []): DeskPage => ({
  sheet: {
    at: AT,
    person: { id: 'p', name: 'x', role: 'technician' },
    site: {
      id: 's',
      name: 'Hall',
      place: '',
      timeZone: 'UTC',
      stage: 'commissioning',
      ruleSet: 'rapid_shutdown_30s',
    },
    unitTypes: [unitType],
    moduleTypes: [moduleType],
    connectors: [
      { ...H4, archived: false },
      { ...K6, archived: false },
    ],
    pairs: [],
    strings,
    limits: { photoMaxBytes: 1 },
  },
  files,
  steps: [],
});

const rowsOf = (of: DeskPage) => listed({ ...of, ...checkMatrix(of.sheet) });

const MIXED = page([
  string('A10', { checks: passed(), signOff: signed(false) }),
  string('A2', { checks: passed(), signOff: signed(true) }),
  string('B1', {
    checks: passed((k) => (k === 'connectors' ? { figures: { moduleLead: H4.id, unitInput: K6.id } } : {})),
  }),
  string('B2', { checks: passed((k) => (k === 'labels' ? null : {})) }),
  string('C1', {
    checks: passed((k) => (k === 'strain_relief' ? { result: 'fail', note: 'on the roof' } : {})),
  }),
  string('D1'),
]);

describe('the matrix of checks', () => {
  const rows = rowsOf(MIXED);
  it('says of each string how it stands', () => {
    expect(rows.map((r) => [r.string.name, r.status])).toEqual([
      ['A10', 'signed'],
      ['A2', 'ready'],
      ['B1', 'blocked'],
      ['B2', 'open'],
      ['C1', 'blocked'],
      ['D1', 'none'],
    ]);
    const { checks } = checkMatrix(MIXED.sheet);
    const mark = (name: string, key: string) =>
      rows.find((r) => r.string.name === name)?.marks[checks.findIndex((c) => c.key === key)];
    expect(mark('B1', 'connectors')).toBe('contradicted');
    expect(mark('C1', 'strain_relief')).toBe('fail');
    expect(mark('A2', 'insulation')).toBe('not_applicable');
    expect(mark('D1', 'labels')).toBe('missing');
  });

  it('has the finding as its heading, fire risks first', () => {
    expect(checksHeading(rows)).toBe('1 of 6\u00a0strings is signed off');
    const { strong, rest } = checksSentence(rows);
    expect(strong).toBe('B1 mates connectors that no document allows: a fire risk.');
    expect(rest).toBe(
      'C1 has a check that did not pass. One is ready to sign: A2 (A2 again: something was recorded since).',
    );
    expect(checksHeading(rowsOf(page([string('A1')])))).toBe('No install check is recorded yet');
    expect(checksHeading(rowsOf(page([])))).toBe('No string has slots to check yet');
    const all = rowsOf(page([string('A1', { checks: passed(), signOff: signed(false) })]));
    expect(checksHeading(all)).toBe('The only string is signed off');
  });

  it('is filtered, searched and sorted as its address says; names by number', () => {
    const names = (more: object) =>
      listedRows(rows, { ...CHECKS_DEFAULTS, ...more }).map((r) => r.string.name);
    expect(names({})).toEqual(['A2', 'A10', 'B1', 'B2', 'C1', 'D1']);
    expect(names({ order: 'down' })[0]).toBe('D1');
    expect(names({ show: 'blocked' })).toEqual(['B1', 'C1']);
    expect(names({ show: 'open' })).toHaveLength(5);
    expect(names({ find: 'ON THE roof' })).toEqual(['C1']);
    expect(names({ sort: 'recorded' })[0]).toBe('D1');
    expect(counted(rows, 'signed')).toBe(1);
  });

  it('keeps a photo with its check when a newer record has taken the place of its own', () => {
    const photo = { stringId: 'A10', check: 'labels', subjectRef: 'an older record' };
    const a10 = string('A10', { checks: passed() });
    const open = openString(page([a10], [photo as DeskPage['files'][number]]), a10);
    expect(open.cells.find((c) => c.check.key === 'labels')?.photos).toEqual([photo]);
    expect(open.cells.find((c) => c.check.key === 'face')?.photos).toEqual([]);
  });

  it('writes figures with names and units', () => {
    const { cells } = openString(MIXED, MIXED.sheet.strings[2]!);
    const cell = (key: string) => cells.find((c) => c.check.key === key)!;
    expect(figureText(cell('connectors'), context().connectors)).toBe(
      'Module lead: H4 set, Unit lead towards the module: K6 set',
    );
    expect(figureText(cell('voltage_to_earth'), [])).toContain('− to earth −9\u00a0V');
  });
});

describe('a check as it is filled in', () => {
  const check = (key: string) => checksFor(context()).find((c) => c.key === key)!;
  it('takes commas, and names what is wrong before it is sent', () => {
    const of = (text: string) =>
      filled(check('earth_continuity'), 'pass', { resistance: text }, context(), 0);
    expect(of('0,4').figures).toEqual({ resistance: 0.4 });
    expect(of('1,4').judged?.words[0]).toContain('common practice');
    expect(of('0.4.1').faults.resistance).toContain('two marks');
    expect(of('').faults.resistance).toContain('missing');
  });
  it('begins with what is known: the record, the catalogue, the readings', () => {
    const sheet = { unitTypes: [unitType], moduleTypes: [moduleType] };
    expect(begun(check('connectors'), null, string('A1'), sheet)).toEqual({
      moduleLead: K6.id,
      unitInput: H4.id,
    });
    expect(begun(check('earth_continuity'), { figures: { resistance: 0.3 } }, string('A1'), sheet)).toEqual({
      resistance: '0.3',
    });
    const readings = [{ kind: 'positive_to_negative', voltage: 560 }] as CaptureString['readings'];
    expect(begun(check('polarity'), null, string('A1', { readings }), sheet)).toEqual({ voltage: '560' });
  });
});

describe('the list of readings', () => {
  type Reading = CaptureString['readings'][number];
  const reading = (voltage: number, more: Partial<Reading> = {}): Reading => ({
    ref: `r${voltage}`,
    stage: 'before_energising',
    kind: 'positive_to_negative',
    light: 'bright',
    meterMode: 'high_impedance',
    commanded: 'unknown',
    voltage,
    note: '',
    at: AT,
    recordedAt: AT,
    person: 'Bram Ottersley',
    supersedes: null,
    finding: null,
    ...more,
  });
  const judged = (strings: CaptureString[]) =>
    strings.map((s) => ({
      ...s,
      readings: s.readings.map((r) => ({
        ...r,
        finding: readingFinding.parse(judgedNow(page([s]).sheet, s.id, r)),
      })),
    }));
  const strings = judged([
    string('A1', { readings: [reading(555)] }),
    string('A2', { readings: [reading(-552)] }),
    string('A3'),
  ]);
  const read = (of: CaptureString[]) => {
    const { sheet } = page(of);
    return readingRows({ sheet, stages: stagesRead(sheet) });
  };
  const rows = read(strings);

  it('has a line for every stage that the type asks for, and a finding for what was read', () => {
    expect(rows.map((r) => [r.string.name, r.stage, r.outcome])).toEqual([
      ['A1', 'before_energising', 'as_expected'],
      ['A1', 'after_roll_call', 'unread'],
      ['A2', 'before_energising', 'finding'],
      ['A2', 'after_roll_call', 'unread'],
      ['A3', 'before_energising', 'unread'],
      ['A3', 'after_roll_call', 'unread'],
    ]);
    expect(readingsHeading(rows)).toBe('1 of 3\u00a0strings reads as expected before energising');
    expect(readingsSentence(rows).strong).toContain('A2: the string is reversed');
    expect(readingsSentence(rows).rest).toBe('A3 is not read.');
    expect(readingsHeading([])).toBe('No string has slots to read yet');
  });

  it('shows the stage that is under way, until somebody asks for another', () => {
    const names = (more: object) => listedReadings(rows, { ...READINGS_DEFAULTS, ...more }).map((r) => r.key);
    expect(stageShown(rows, READINGS_DEFAULTS)).toBe('before_energising');
    expect(names({})).toHaveLength(3);
    expect(names({ stage: 'all' })).toHaveLength(6);
    expect(names({ show: 'odd' })).toEqual(['A2 before_energising']);
    expect(names({ sort: 'outcome' })[0]).toBe('A2 before_energising');
    expect(names({ show: 'unread' })).toEqual(['A3 before_energising']);
  });

  it('turns a string with a conductor to earth into a finding, whatever + to − says', () => {
    const earthed = judged([
      string('A1', {
        readings: [
          reading(555),
          reading(198, { kind: 'positive_to_earth' }),
          reading(-357, { kind: 'negative_to_earth' }),
        ],
      }),
    ]);
    expect(read(earthed)[0]).toMatchObject({
      outcome: 'finding',
      earth: { outcome: 'fault' },
    });
  });

  it('judges again what strings measured since say more about, and only that', () => {
    const [before] = judged([string('A1', { readings: [reading(495)] })]);
    const { finding } = before!.readings[0]!;
    const beside = ['A2', 'A3', 'A4', 'A5'].map((name) => string(name, { readings: [reading(555)] }));
    const rows = read([before!, ...beside]);
    expect(rows[0]).toMatchObject({ outcome: finding.outcome, headline: finding.headline });
    expect(rows[0]!.now?.siblings).toEqual(['A2', 'A3', 'A4', 'A5']);
    expect(rows[0]!.now?.headline).not.toBe(finding.headline);
    expect(read([before!])[0]?.now).toBeNull();
    // what nobody has judged yet is judged here, and is no second judgement
    expect(rows[2]).toMatchObject({ stringId: 'A2', outcome: 'as_expected', now: null });
  });
});
