import {
  READING_KINDS,
  READING_STAGES,
  stagesFor,
  usualCommand,
  type ReadingKind,
  type ReadingStage,
} from '../../domain/commissioning/readings/stages';
import { KIND_WORDS } from '../../words/domain-reading-stages';
import { CHECK_KEYS } from '../../domain/commissioning/checks/definition';
import {
  COMMANDED,
  DEFAULTS as FORM_DEFAULTS,
  FIELD_AT,
  LIGHTS,
  METERS,
  PLACES,
  chosen,
  type Place,
  type ReadingForm,
} from '../../components/readings/form-choices';
import type { CaptureSnapshot, CaptureString } from '../../schemas/api/capture';

/** What the phone shows and what is typed on it, kept in the address: a reload loses nothing. All text. */
export interface CaptureView extends Record<string, string> {
  /** Public identifier; empty: the list of strings. */
  string: string;
  part: string;
  /** Words that the list is searched for. */
  q: string;
  stage: string;
  at: string;
  v: string;
  pe: string;
  ne: string;
  /** Empty: as is usual at the stage. */
  commanded: string;
  light: string;
  meter: string;
  /** The check that is open. */
  check: string;
  /** Ref that the record will carry, once something (a photo) speaks of it. */
  draft: string;
  /** Ref of a waiting record that is put right here. */
  fix: string;
}
export const PARTS = ['readings', 'checks', 'waiting'] as const;
export type Part = (typeof PARTS)[number];

export const VIEW_DEFAULTS: CaptureView = {
  string: '',
  part: 'readings',
  q: '',
  stage: 'before_energising',
  at: 'between',
  v: '',
  pe: '',
  ne: '',
  commanded: '',
  light: 'bright',
  meter: 'high_impedance',
  check: '',
  draft: '',
  fix: '',
};
const LONGEST = 100;
const CHOICES: Partial<Record<keyof CaptureView, readonly string[]>> = {
  part: PARTS,
  stage: READING_STAGES,
  at: PLACES,
  commanded: ['', ...COMMANDED],
  light: LIGHTS,
  meter: METERS,
  check: ['', ...CHECK_KEYS],
};

/** The view that an address carries; what is no choice is the default. */
export function viewOf(search: string): CaptureView {
  const given = new URLSearchParams(search);
  const view = { ...VIEW_DEFAULTS };
  for (const key of Object.keys(VIEW_DEFAULTS)) {
    const value = given.get(key);
    if (value === null || value.length > LONGEST) continue;
    const allowed = CHOICES[key];
    if (!allowed || allowed.includes(value)) view[key] = value;
  }
  return view;
}

/** What is left of a view when another string is opened: light, meter, stage and command go with the person. */
export const forString = (view: CaptureView, string: string): CaptureView => ({
  ...VIEW_DEFAULTS,
  string,
  q: view.q,
  part: view.part === 'waiting' ? 'readings' : view.part,
  stage: view.stage,
  commanded: view.commanded,
  light: view.light,
  meter: view.meter,
});

export const PLACE_OF: Record<ReadingKind, Place> = {
  positive_to_negative: 'between',
  positive_to_earth: 'positive',
  negative_to_earth: 'negative',
};
export const KIND_OF: Record<Place, ReadingKind> = {
  between: 'positive_to_negative',
  positive: 'positive_to_earth',
  negative: 'negative_to_earth',
};
/** The kind that usually comes after this one at the same string; null: it was the last. */
export const placeAfter = (place: Place): Place | null => PLACES[PLACES.indexOf(place) + 1] ?? null;
export const kindWords = (place: Place): string => KIND_WORDS[KIND_OF[place]];

export const typesOf = (snapshot: CaptureSnapshot, string: CaptureString) => ({
  unitType: snapshot.unitTypes.find((t) => t.id === string.unitTypeId) ?? null,
  module: snapshot.moduleTypes.find((t) => t.id === string.moduleTypeId) ?? null,
});

/** The stage that is meant: the one chosen if this string is read at it, else the nearest that it has. */
export function stageOf(
  view: CaptureView,
  unitType: Parameters<typeof stagesFor>[0],
): { stage: ReadingStage; stages: ReadingStage[] } {
  const stages = stagesFor(unitType);
  const wanted = chosen(READING_STAGES, view.stage, 'before_energising');
  const later = wanted === 'before_energising' ? stages[0] : stages[stages.length - 1];
  return { stage: stages.includes(wanted) ? wanted : (later ?? 'before_energising'), stages };
}

/** The form of the meter's screen for one string, from the view and from what is known of the string. */
export function formOf(
  view: CaptureView,
  string: CaptureString,
  kind: string,
  stage: ReadingStage,
): ReadingForm {
  return {
    ...FORM_DEFAULTS,
    kind,
    units: String(string.units),
    commanded: chosen(COMMANDED, view.commanded, usualCommand(stage, string.commanded)),
    heard: String(string.heard),
    light: view.light,
    meter: view.meter,
    at: view.at,
    v: view.v,
    pe: view.pe,
    ne: view.ne,
  };
}

/** What a change of the meter's form changes of the view. */
export function viewChange(some: Partial<ReadingForm>): Partial<CaptureView> {
  const kept = ['commanded', 'light', 'meter', 'at', 'v', 'pe', 'ne'] as const;
  return Object.fromEntries(kept.flatMap((key) => (some[key] === undefined ? [] : [[key, some[key]]])));
}

/** The string after this one in the order of the list; null: it was the last. */
export function stringAfter(strings: readonly CaptureString[], id: string): CaptureString | null {
  const at = strings.findIndex((s) => s.id === id);
  return at < 0 ? null : (strings[at + 1] ?? null);
}

export const typedPlaces = (view: CaptureView): Place[] =>
  PLACES.filter((place) => (view[FIELD_AT[place]] ?? '').trim() !== '');

export const kindsRead = (string: CaptureString, stage: ReadingStage): ReadingKind[] =>
  READING_KINDS.filter((kind) => string.readings.some((r) => r.stage === stage && r.kind === kind));
