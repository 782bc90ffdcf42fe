import { roofPlaceSaid, WINDS } from '../../../words/domain-roof';

/** A string laid on the roof row by row: where each module lies in plan, and how a person would say it. */

export interface RoofPoint {
  /** m, to the east. */
  x: number;
  /** m, to the north. */
  y: number;
}

export interface Laying {
  /** Modules in the string. */
  count: number;
  /** Middle of the first module, position 1. */
  start: RoofPoint;
  /** Where the first row runs, degrees clockwise from north. */
  direction: number;
  /** On which hand of that direction the next row lies. */
  nextRow: 'left' | 'right';
  perRow: number;
  /** Of the module's frame, m. */
  moduleLength: number;
  moduleWidth: number;
  /** portrait: the long side runs up the slope, so that the short side lies along the row. */
  orientation: 'portrait' | 'landscape';
  /** Between neighbours in a row and between rows, m. */
  gapAlong: number;
  gapAcross: number;
  /** true: the next row runs back; false: each row starts on the same side. */
  serpentine: boolean;
  /** Of the plane, degrees: the plan shows lengths down the slope shortened by its cosine. */
  surfaceTilt: number;
  surfaceAzimuth: number;
}

export interface LaidModule extends RoofPoint {
  position: number;
  /** From 0, in the order of laying. */
  row: number;
  /** From 0, counted from the side where the first row starts. */
  column: number;
}

const rad = (degrees: number): number => (degrees * Math.PI) / 180;
/** The direction of an azimuth in plan, of length 1. */
const heading = (azimuth: number): RoofPoint => ({ x: Math.sin(rad(azimuth)), y: Math.cos(rad(azimuth)) });
const toMillimetre = (m: number): number => Math.round(m * 1000) / 1000 + 0;

/** Where each module of a string lies in plan. @param laying count and perRow at least 1 */
export function layString(laying: Laying): LaidModule[] {
  const { count, perRow, serpentine, start } = laying;
  const [alongM, acrossM] =
    laying.orientation === 'portrait'
      ? [laying.moduleWidth, laying.moduleLength]
      : [laying.moduleLength, laying.moduleWidth];
  const along = heading(laying.direction);
  const across = heading(laying.direction + (laying.nextRow === 'right' ? 90 : -90));
  const fall = heading(laying.surfaceAzimuth);
  const shortened = 1 - Math.cos(rad(laying.surfaceTilt));
  return Array.from({ length: count }, (_, i) => {
    const row = Math.floor(i / perRow);
    const inRow = i % perRow;
    const column = serpentine && row % 2 === 1 ? perRow - 1 - inRow : inRow;
    const a = column * (alongM + laying.gapAlong);
    const b = row * (acrossM + laying.gapAcross);
    const on = { x: along.x * a + across.x * b, y: along.y * a + across.y * b };
    const down = on.x * fall.x + on.y * fall.y;
    return {
      position: i + 1,
      row,
      column,
      x: toMillimetre(start.x + on.x - shortened * down * fall.x),
      y: toMillimetre(start.y + on.y - shortened * down * fall.y),
    };
  });
}

/** The nearest of eight winds. */
export const compass = (azimuth: number): string =>
  WINDS[((Math.round(azimuth / 45) % 8) + 8) % 8] ?? String(azimuth);

/** Rows on a slope from the ridge down; on a flat roof, and where rows run down the slope, in the order of laying. */
function rowWords(row: number, rows: number, nextRowIsLower: boolean | null): string {
  if (rows === 1) return '';
  const said = roofPlaceSaid;
  if (nextRowIsLower === null) return said.row(row + 1);
  const fromTop = nextRowIsLower ? row : rows - 1 - row;
  if (rows <= 3 && fromTop === 0) return said.upper;
  if (rows <= 3) return fromTop === rows - 1 ? said.lower : said.middle;
  if (fromTop === 0) return said.top;
  if (fromTop === rows - 1) return said.bottom;
  return said.fromTop(fromTop + 1);
}

/** The side from which columns count, if nobody gives it another name: "west end". */
export const startSide = (direction: number): string => roofPlaceSaid.sideAt(compass(direction + 180));

/**
 * How a person finds each module: "upper row, fifth from the gable".
 * @param from what columns are counted from, without an article; empty: the compass says
 */
export function placeWords(laying: Laying, laid: readonly LaidModule[], from: string): string[] {
  const rows = Math.max(0, ...laid.map((m) => m.row)) + 1;
  const across = laying.direction + (laying.nextRow === 'right' ? 90 : -90);
  const downhill = Math.cos(rad(across - laying.surfaceAzimuth));
  // under 3° a roof has no up and down that an eye sees (common practice)
  const lower = laying.surfaceTilt < 3 || Math.abs(downhill) < 0.5 ? null : downhill > 0;
  const side = from.trim() === '' ? startSide(laying.direction) : from.trim();
  return laid.map((m) => {
    const row = rowWords(m.row, rows, lower);
    return row === ''
      ? roofPlaceSaid.inOnlyRow(m.column + 1, side)
      : roofPlaceSaid.inRow(row, m.column + 1, side);
  });
}

/** Where the next string would start: below or beside the last row of this one. */
export function startAfter(laying: Laying): RoofPoint {
  const rows = Math.ceil(laying.count / laying.perRow);
  const whole = layString({ ...laying, count: rows * laying.perRow + 1, serpentine: false });
  const next = whole.at(-1);
  return next ? { x: next.x, y: next.y } : laying.start;
}
