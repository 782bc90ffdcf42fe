import {
  layString,
  placeWords,
  startAfter,
  type LaidModule,
  type Laying,
  type RoofPoint,
} from '../../domain/commissioning/roof/lay';
import { typedNumber, type NumberRange } from '../../schemas/typed-number';
import type { RoofSlot, RoofString } from '../../schemas/api/roof';
import { layingForm } from '../../words/roof';

/** How a string is to be laid, as it is typed. */
export interface LayingForm {
  startX: string;
  startY: string;
  /** Degrees clockwise from north. */
  direction: string;
  nextRow: Laying['nextRow'];
  perRow: string;
  orientation: Laying['orientation'];
  gapAlong: string;
  gapAcross: string;
  serpentine: boolean;
  /** What columns are counted from; empty: the compass says. */
  from: string;
  /** So many strings one after the other. */
  strings: string;
}

export const RANGES = {
  startX: { min: -2000, max: 2000, unit: 'm' },
  startY: { min: -2000, max: 2000, unit: 'm' },
  direction: { min: 0, max: 360, unit: '°' },
  perRow: { min: 1, max: 63, whole: true },
  gapAlong: { min: 0, max: 10, unit: 'm' },
  gapAcross: { min: 0, max: 20, unit: 'm' },
  strings: { min: 1, max: 200, whole: true },
} as const satisfies Partial<Record<keyof LayingForm, NumberRange>>;
export type NumberKey = keyof typeof RANGES;
export const LABELS: Record<NumberKey, string> = {
  startX: layingForm.firstModuleEast,
  startY: layingForm.firstModuleNorth,
  direction: layingForm.rowRunsTowards,
  perRow: layingForm.modulesInARow,
  gapAlong: layingForm.betweenModules,
  gapAcross: layingForm.betweenRows,
  strings: layingForm.stringsAlike,
};

/** Along the eaves to begin with, rows going down the slope. */
export const formFor = (string: RoofString, start: RoofPoint | null): LayingForm => ({
  startX: start ? String(start.x) : '',
  startY: start ? String(start.y) : '',
  direction: String(Math.round((string.surfaceAzimuth + 270) % 360)),
  nextRow: 'right',
  perRow: String(string.slots.length),
  orientation: 'portrait',
  gapAlong: '0.02',
  gapAcross: '0.02',
  serpentine: true,
  from: '',
  strings: '1',
});

export interface LaidString {
  string: RoofString;
  laid: LaidModule[];
  slots: RoofSlot[];
}
export type ReadForm =
  | { laid: LaidString[]; next: RoofPoint; faults: null }
  | { laid: null; faults: Partial<Record<NumberKey, string>> };

/** Lays the string, and others after it, as the form says; or what is wrong at which field. */
export function readLaying(form: LayingForm, strings: readonly RoofString[]): ReadForm {
  const faults: Partial<Record<NumberKey, string>> = {};
  const value = (key: NumberKey): number => {
    const read = typedNumber(form[key], LABELS[key], RANGES[key]);
    if (read.fault !== null) faults[key] = read.fault;
    return read.value ?? 0;
  };
  const [x, y, direction, perRow] = [value('startX'), value('startY'), value('direction'), value('perRow')];
  const [gapAlong, gapAcross, many] = [value('gapAlong'), value('gapAcross'), value('strings')];
  if (Object.keys(faults).length > 0) return { laid: null, faults };
  let start = { x, y };
  const laid = strings.slice(0, many).map((string): LaidString => {
    const laying: Laying = {
      count: string.slots.length,
      start,
      direction,
      nextRow: form.nextRow,
      perRow: Math.min(perRow, string.slots.length),
      moduleLength: string.moduleLength,
      moduleWidth: string.moduleWidth,
      orientation: form.orientation,
      gapAlong,
      gapAcross,
      serpentine: form.serpentine,
      surfaceTilt: string.surfaceTilt,
      surfaceAzimuth: string.surfaceAzimuth,
    };
    const modules = layString(laying);
    const words = placeWords(laying, modules, form.from);
    start = startAfter(laying);
    return {
      string,
      laid: modules,
      slots: string.slots.map((slot, i) => ({
        position: slot.position,
        roofX: modules[i]?.x ?? slot.roofX,
        roofY: modules[i]?.y ?? slot.roofY,
        roofPlace: words[i] ?? slot.roofPlace,
      })),
    };
  });
  return { laid, next: start, faults: null };
}
