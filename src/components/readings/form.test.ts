import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { interpretReading } from '../../domain/readings/interpret';
import { addressOf } from '../../lib/view-in-url';
import { formOf, othersOf, othersText, pressed, readForm } from './form';
import { COMMANDED, DEFAULTS, LIGHTS, METERS, PLACES, type ReadingForm } from './form-choices';
import { SHEET_KEYS } from './sheets';
import { scaleOf } from './scale';
import {
  aloud,
  cautionParts,
  chance,
  hueOf,
  initiatorWords,
  outcomeWords,
  reasoning,
  shownHypotheses,
} from './words';

const form = (some: Partial<ReadingForm>): ReadingForm => ({ ...DEFAULTS, ...some }) as ReadingForm;
const askedOf = (some: Partial<ReadingForm>) => {
  const { question, faults } = readForm(form(some));
  if (!question) throw new Error(JSON.stringify(faults));
  return { question, answer: interpretReading(question) };
};

const text = fc.string({ maxLength: 30 });
const anyForm = fc.record({
  kind: fc.constantFrom('shutdown_only', 'monitored', 'optimizing'),
  module: fc.constantFrom(...SHEET_KEYS, 'own'),
  commanded: fc.constantFrom(...COMMANDED),
  light: fc.constantFrom(...LIGHTS),
  meter: fc.constantFrom(...METERS),
  at: fc.constantFrom(...PLACES),
  units: text,
  voc: text,
  beta: text,
  cells: text,
  groups: text,
  heard: text,
  v: text,
  pe: text,
  ne: text,
  poa: text,
  cell: text,
  others: text,
});
const volts = fc
  .integer({ min: -20_000, max: 20_000 })
  .map((tenths) => String(tenths / 10).replace('.', ','));
const goodForm = fc.record({
  kind: fc.constantFrom('shutdown_only', 'monitored', 'optimizing'),
  module: fc.constantFrom(...SHEET_KEYS),
  commanded: fc.constantFrom(...COMMANDED),
  light: fc.constantFrom(...LIGHTS),
  meter: fc.constantFrom(...METERS),
  units: fc.integer({ min: 1, max: 63 }).map(String),
  v: volts,
  pe: fc.oneof(fc.constant(''), volts),
  ne: fc.oneof(fc.constant(''), volts),
  others: fc.oneof(
    fc.constant(''),
    fc.tuple(fc.integer({ min: 1, max: 20 }), volts).map(([units, v]) => `${units}:${v}`),
  ),
});

describe('the address', () => {
  it('brings back whatever was typed, right or wrong', () => {
    fc.assert(
      fc.property(anyForm, (some) => {
        const typed = form(some);
        const address = addressOf('/try-a-reading', typed, DEFAULTS);
        expect(formOf(new URL(address, 'http://roof').searchParams)).toEqual(typed);
      }),
    );
  });
  it('takes the default where a word is no choice or a text is far too long', () => {
    expect(formOf(new URLSearchParams({ kind: 'magic', light: 'moon', v: '7'.repeat(500) }))).toEqual(
      DEFAULTS,
    );
  });
  it('never throws on what it carries, and says what is wrong with it', () => {
    fc.assert(
      fc.property(anyForm, (some) => {
        const { question, faults, waiting } = readForm(form(some));
        if (question) expect(faults).toEqual({});
        else expect(waiting).toBe(Object.keys(faults).length === 0);
      }),
    );
  });
  it('keeps the readings of other strings apart', () => {
    const others = [
      { units: '14', volts: '8,4' },
      { units: '', volts: '' },
    ];
    expect(othersOf(othersText(others))).toEqual(others);
    expect(othersText([{ units: '1:4', volts: '8;4' }])).toBe('14:84');
  });
});

describe('what is asked', () => {
  it('a comma is a point and a minus is a finding', () => {
    expect(askedOf({ v: '7,8' }).question.voltageV).toBe(7.8);
    const { question, answer } = askedOf({
      kind: 'monitored',
      commanded: 'released',
      heard: '14',
      v: '−512',
    });
    expect(question.voltageV).toBe(-512);
    expect(answer.hypotheses[0]?.kind).toBe('reversed');
    expect(reasoning(answer, question).join(' ')).toContain('The reading is negative');
  });
  it('own values are read in the datasheet’s own units', () => {
    const { question } = askedOf({ module: 'own', voc: '41,2', beta: '−0,28', cells: '60', v: '1' });
    expect(question.module).toMatchObject({ vocRef: 41.2, cellsInSeries: 60, bypassGroups: 3 });
    expect(question.module.betaVoc).toBeCloseTo(-0.0028, 12);
  });
  it.each([
    [{ units: '0', v: '8' }, 'units', 'Units in the string: 0 is outside'],
    [{ units: '64', v: '8' }, 'units', 'Type a number from 1 to 63'],
    [{ v: 'OL' }, 'v', '"OL" is no number'],
    [{ v: '8', poa: '800' }, 'cell', 'count together'],
    [{ v: '8', others: '14:x' }, 'others.0.volts', 'Reading of the other string'],
    [{ kind: 'monitored', heard: '15', v: '8' }, 'heard', '15 is outside'],
    [{ module: 'own', v: '8' }, 'voc', 'Open-circuit voltage'],
  ])('%j: the fault stands at its field', (some, field, words) => {
    const { question, faults } = readForm(form(some));
    expect(question).toBeNull();
    expect(faults[field]).toContain(words);
  });
  it('nothing typed is no fault', () => {
    expect(readForm(DEFAULTS)).toEqual({ question: null, faults: {}, waiting: true });
  });
});

describe('what is said', () => {
  it('14 shutdown-only units without keep-alive: 8.4 V is as expected (common practice)', () => {
    const { answer } = askedOf({ v: '8.4' });
    expect(outcomeWords(answer)).toBe('As expected');
  });
  it('7.8 V leaves more than one explanation in sight, the expected one among them', () => {
    const { answer, question } = askedOf({ v: '7.8' });
    const shown = shownHypotheses(answer);
    expect(shown.length).toBeGreaterThan(1);
    expect(shown.some((h) => h.asExpected)).toBe(true);
    expect(reasoning(answer, question).join(' ')).toContain('One unit in shutdown is worth 0.6\u00a0V');
  });
  it('a monitored string that nothing has spoken to follows no initiator, and is said to be live', () => {
    const { answer, question } = askedOf({ kind: 'monitored', commanded: 'shutdown', v: '480' });
    expect(initiatorWords(answer, question)).toMatch(/^No\. .*Treat the string as live/);
    expect(answer.cautions).toHaveLength(2);
  });
  it('units in shutdown that nothing has spoken to: the type and the roll call are to be checked', () => {
    const said = (some: Partial<ReadingForm>) => {
      const { answer, question } = askedOf({ kind: 'monitored', commanded: 'released', ...some });
      return reasoning(answer, question).join(' ');
    };
    expect(said({ heard: '0', v: '8.4' })).toContain('check the unit type and the roll call, then measure');
    expect(said({ heard: '0', v: '480' })).not.toContain('check the unit type');
    expect(said({ heard: '14', v: '8.4' })).not.toContain('check the unit type');
  });
  it('full voltage though the keep-alive is off speaks against the initiator', () => {
    const { answer, question } = askedOf({ v: '480' });
    expect(initiatorWords(answer, question)).toMatch(/^The reading speaks against it/);
  });
  it('crimson is for units that pass though they should not, never for too few that pass', () => {
    const unheard = askedOf({ kind: 'monitored', commanded: 'shutdown', v: '440' });
    const hues = unheard.answer.hypotheses
      .filter((h) => h.kind === 'some_passing' || h.kind === 'all_passing')
      .map((h) => hueOf(h, unheard.question));
    expect(hues.length).toBeGreaterThan(1);
    expect(hues).not.toContain('crimson');
    const held = askedOf({ v: '480' });
    expect(hueOf(held.answer.hypotheses[0]!, held.question)).toBe('crimson');
  });
  it('whatever is read: a caution, no certainty, no word that it is safe, a ruler that holds the reading', () => {
    fc.assert(
      fc.property(goodForm, (some) => {
        const { answer, question } = askedOf(some);
        const spoken = aloud(answer, question);
        expect(answer.cautions.map(cautionParts).some((c) => c.strong === 'Shutdown is not isolation.')).toBe(
          true,
        );
        expect(spoken).toContain('Shutdown is not isolation');
        const all = [spoken, initiatorWords(answer, question), ...reasoning(answer, question)].join(' ');
        expect(all).not.toMatch(/\bsafe(ly)?\b|NaN|undefined|Infinity/i);
        for (const h of shownHypotheses(answer)) expect(chance(h.probability)).not.toMatch(/^(0|100)\u00a0%/);
        const scale = scaleOf(answer, question);
        expect(scale.ticks.length).toBeLessThanOrEqual(40);
        expect(scale.ticks.length).toBeGreaterThan(1);
        for (const at of [
          scale.reading.at,
          ...scale.bands.flatMap((b) => [b.from, b.to]),
          ...scale.ticks.map((t) => t.at),
        ])
          expect(at >= 0 && at <= 1).toBe(true);
      }),
      { numRuns: 60 },
    );
  });
});

describe('the number pad', () => {
  const keys = (...list: string[]) => list.reduce(pressed, '');
  it('builds a number as a thumb does', () => {
    expect(keys('7', '.', '8')).toBe('7.8');
    expect(keys('.', '5')).toBe('0.5');
    expect(keys('0', '8')).toBe('8');
    expect(keys('7', '.', '.', '8', 'back', '9')).toBe('7.9');
    expect(keys('8', 'sign')).toBe('−8');
    expect(keys('8', 'sign', 'sign')).toBe('8');
    expect(keys('8', 'clear')).toBe('');
  });
  it('never makes anything but a number in the making', () => {
    const key = fc.constantFrom('0', '1', '9', '.', 'back', 'sign', 'clear');
    fc.assert(
      fc.property(fc.array(key, { maxLength: 20 }), (list) => {
        expect(list.reduce(pressed, '')).toMatch(/^−?(\d+\.?\d*)?$/);
      }),
    );
  });
});
