import { UNIT_KINDS, UNIT_PRESETS } from '../../domain/equipment/unit-type';
import type { ModuleType } from '../../domain/equipment/module-type';
import {
  ORDINARY_METER,
  type Conditions,
  type ReadingQuestion,
  type SiblingReading,
} from '../../domain/readings/reading';
import { typedNumber, type NumberRange } from '../../schemas/typed-number';
import { COMMANDED, DEFAULTS, LIGHTS, METERS, PLACES, chosen, type ReadingForm } from './form-choices';
import { SHEET_KEYS, SHEETS, type SheetKey } from './sheets';
import { sharedReadingsForm } from '../../words/shared-readings';

/** Longer text is no reading. */
const LONGEST = 200;
/** More strings than this are not on one roof beside each other. */
export const OTHERS_MAX = 12;

const choices: Partial<Record<keyof ReadingForm, readonly string[]>> = {
  kind: UNIT_KINDS,
  module: [...SHEET_KEYS, 'own'],
  commanded: COMMANDED,
  light: LIGHTS,
  meter: METERS,
  at: PLACES,
};

/** The form that an address carries; what it does not say, or says in a word that is no choice, is the default. */
export function formOf(search: URLSearchParams): ReadingForm {
  const form = { ...DEFAULTS };
  for (const key of Object.keys(DEFAULTS)) {
    const value = search.get(key);
    if (value === null || value.length > LONGEST) continue;
    const allowed = choices[key];
    if (!allowed || allowed.includes(value)) form[key] = value;
  }
  return form;
}

/** What the parts of a form are given: its text, what is wrong with it, and ways to change it. */
export interface PanelProps {
  form: ReadingForm;
  faults: Faults;
  typed: (some: Partial<ReadingForm>) => void;
  choose: (some: Partial<ReadingForm>) => void;
}

export interface OtherString {
  units: string;
  volts: string;
}
export const othersOf = (text: string): OtherString[] =>
  text === ''
    ? []
    : text
        .split(';')
        .slice(0, OTHERS_MAX)
        .map((part) => {
          const [units = '', ...rest] = part.split(':');
          return { units, volts: rest.join(':') };
        });
/** `:` and `;` part the readings of other strings, so they can't be in them. */
export const othersText = (others: readonly OtherString[]): string =>
  others.map((o) => `${o.units.replace(/[:;]/g, '')}:${o.volts.replace(/[:;]/g, '')}`).join(';');

export type Faults = Partial<Record<string, string>>;
export interface Read {
  /** null: something is missing or wrong. */
  question: ReadingQuestion | null;
  /** By field; `others.0.volts` for the readings of other strings. */
  faults: Faults;
  /** Nothing is wrong, the reading is only not there yet. */
  waiting: boolean;
}

/** Limits of what can be entered; those of units and volts are the interpreter's. */
export const RANGES = {
  units: { min: 1, max: 63, whole: true },
  volts: { min: -2000, max: 2000, unit: 'V' },
  poa: { min: 1, max: 1500, unit: 'W/m²' },
  cell: { min: -40, max: 100, unit: '°C' },
  voc: { min: 5, max: 200, unit: 'V' },
  beta: { min: -1, max: 0, unit: '%' },
  cells: { min: 6, max: 250, whole: true },
  groups: { min: 1, max: 12, whole: true },
} as const;
/** How well a person on a roof measures light and cell temperature; from experience. */
const MEASURED = { poaRelativeSd: 0.05, temperatureSd: 3 } as const;

/** What is known of the string besides what is typed: then the form's own words for it do not count. */
export interface KnownString {
  units: number;
  unitType: ReadingQuestion['unitType'];
  module: ModuleType;
  /** Readings of other strings of the same types, under the same light. */
  siblings: readonly SiblingReading[];
}

/** What is asked of the interpreter, or what is wrong with each field. */
export function readForm(form: ReadingForm, known?: KnownString): Read {
  const faults: Faults = {};
  const number: ReadNumber = (key, text, name, range) => {
    const { value, fault } = typedNumber(text, name, range);
    if (fault !== null) faults[key] = fault;
    return value;
  };
  const optional = (key: string, name: string, range: NumberRange): number | null =>
    (form[key] ?? '').trim() === '' ? null : number(key, form[key] ?? '', name, range);

  const unitType = known?.unitType ?? UNIT_PRESETS[chosen(UNIT_KINDS, form.kind, 'shutdown_only')];
  const units =
    known?.units ?? number('units', form.units, sharedReadingsForm.unitsInTheString, RANGES.units);
  const module = known?.module ?? readModule(form, number);
  const tells = unitType.kind !== 'shutdown_only';
  const heard = tells
    ? number('heard', form.heard, sharedReadingsForm.unitsThatHaveAnswered, {
        min: 0,
        max: units ?? 63,
        whole: true,
      })
    : 0;
  const voltageV = optional('v', sharedReadingsForm.readingTo, RANGES.volts);
  const positiveV = optional('pe', sharedReadingsForm.readingToEarth, RANGES.volts);
  const negativeV = optional('ne', sharedReadingsForm.readingToEarth2, RANGES.volts);
  const conditions = readConditions(optional, faults);
  const siblings = othersOf(form.others).flatMap((other, i): SiblingReading[] => {
    if (other.units.trim() === '' && other.volts.trim() === '') return [];
    const its = number(`others.${i}.units`, other.units, sharedReadingsForm.unitsOfTheOther, RANGES.units);
    const volts = number(
      `others.${i}.volts`,
      other.volts,
      sharedReadingsForm.readingOfTheOther,
      RANGES.volts,
    );
    return its === null || volts === null ? [] : [{ units: its, voltageV: volts }];
  });
  const wrong = Object.keys(faults).length > 0;
  if (wrong || units === null || module === null || heard === null || voltageV === null)
    return { question: null, faults, waiting: !wrong };
  return {
    faults,
    waiting: false,
    question: {
      units,
      unitType,
      module,
      commanded: chosen(COMMANDED, form.commanded, 'unknown'),
      heard,
      light: chosen(LIGHTS, form.light, 'bright'),
      conditions,
      meter: { ...ORDINARY_METER, mode: chosen(METERS, form.meter, 'high_impedance') },
      voltageV,
      siblings: known ? [...known.siblings, ...siblings] : siblings,
      earth: positiveV === null && negativeV === null ? null : { positiveV, negativeV },
    },
  };
}

type ReadNumber = (key: string, text: string, name: string, range: NumberRange) => number | null;

/** The typical sheet, or the four values that the interpreter uses of one's own. */
function readModule(form: ReadingForm, number: ReadNumber): ModuleType | null {
  const key = SHEET_KEYS.find((k): k is SheetKey => k === form.module);
  if (key) return SHEETS[key];
  const voc = number('voc', form.voc, sharedReadingsForm.openCircuitVoltage, RANGES.voc);
  const beta = number('beta', form.beta, sharedReadingsForm.temperatureCoefficient, RANGES.beta);
  const cells = number('cells', form.cells, sharedReadingsForm.cellsInSeries, RANGES.cells);
  const groups = number('groups', form.groups, sharedReadingsForm.bypassDiodes, RANGES.groups);
  if (voc === null || beta === null || cells === null || groups === null) return null;
  // currents and the working point say nothing of an open string: the typical ones stand in
  return {
    ...SHEETS.m108,
    name: sharedReadingsForm.ownValues,
    vocRef: voc,
    betaVoc: beta / 100,
    cellsInSeries: cells,
    bypassGroups: groups,
  };
}

function readConditions(
  optional: (key: string, name: string, range: NumberRange) => number | null,
  faults: Faults,
): Conditions | null {
  const poaGlobal = optional('poa', sharedReadingsForm.lightOnTheModules, RANGES.poa);
  const temperatureCell = optional('cell', sharedReadingsForm.cellTemperature, RANGES.cell);
  if (poaGlobal === null && temperatureCell === null) return null;
  if (poaGlobal === null || temperatureCell === null) {
    const missing = poaGlobal === null ? 'poa' : 'cell';
    faults[missing] ??= sharedReadingsForm.lightAndCellTemperature(missing);
    return null;
  }
  return { poaGlobal, temperatureCell, ...MEASURED };
}

/** What a key of the number pad makes of the text that stands there. */
export function pressed(text: string, key: string): string {
  if (key === 'back') return text.replace(/[\s\S]$/, '');
  if (key === 'clear') return '';
  if (key === 'sign') {
    const bare = text.trim().replace(/^[+]/, '');
    return /^[-−–]/.test(bare) ? bare.slice(1) : `−${bare}`;
  }
  if (key === '.') {
    if (/[.,]/.test(text)) return text;
    return /\d$/.test(text) ? `${text}.` : `${text}0.`;
  }
  return text.length >= 8 ? text : text === '0' || text === '−0' ? text.replace('0', key) : text + key;
}
