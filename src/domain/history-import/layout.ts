/** What the columns of a file of earlier readings mean, as guessed and as a person decided. */
import { historySubjects, layoutSaid } from '../../words/domain-history-import';
import type { DecimalMark } from '../commissioning/import/number';

export const QUANTITIES = ['voltage', 'current', 'power', 'energy', 'temperature'] as const;
export type Quantity = (typeof QUANTITIES)[number];

interface UnitOf {
  unit: string;
  /** What SI has of it: value × factor + offset. */
  factor: number;
  offset?: number;
}
/** Units that a column may be in; the first one is what is kept: V, A, W, Wh, °C. */
export const UNITS: Record<Quantity, readonly [UnitOf, ...UnitOf[]]> = {
  voltage: [
    { unit: 'V', factor: 1 },
    { unit: 'mV', factor: 0.001 },
    { unit: 'kV', factor: 1000 },
  ],
  current: [
    { unit: 'A', factor: 1 },
    { unit: 'mA', factor: 0.001 },
  ],
  power: [
    { unit: 'W', factor: 1 },
    { unit: 'kW', factor: 1000 },
    { unit: 'MW', factor: 1e6 },
  ],
  energy: [
    { unit: 'Wh', factor: 1 },
    { unit: 'kWh', factor: 1000 },
    { unit: 'MWh', factor: 1e6 },
  ],
  temperature: [
    { unit: '°C', factor: 1 },
    { unit: '°F', factor: 5 / 9, offset: -160 / 9 },
  ],
};

/** Beyond these a figure is in another unit, or is none (common practice: no string, inverter or site has more). */
export const RANGES: Record<Quantity, readonly [number, number]> = {
  voltage: [-2000, 3000], // V
  current: [-200, 20_000], // A
  power: [-1e6, 1e8], // W
  energy: [-1e5, 1e9], // Wh
  temperature: [-60, 150], // °C
};

/** What a row or a column says something about, by the names of the as-built. */
export type Subject =
  | { kind: 'string'; string: string }
  | { kind: 'unit'; string: string; position: number }
  | { kind: 'input'; inverter: string; input: number }
  | { kind: 'inverter'; inverter: string };

export const subjectKey = (s: Subject): string =>
  s.kind === 'string'
    ? `s ${s.string}`
    : s.kind === 'unit'
      ? `u ${s.string} ${s.position}`
      : s.kind === 'input'
        ? `i ${s.inverter} ${s.input}`
        : `v ${s.inverter}`;

export const subjectWords = historySubjects.subject;

/** Columns that say when, and of what. */
export const PLACE_COLUMNS = ['at', 'date', 'clock', 'string', 'position', 'inverter', 'input'] as const;
export type PlaceColumn = (typeof PLACE_COLUMNS)[number];

export type ColumnUse =
  | { as: 'nothing' }
  | { as: PlaceColumn }
  /** `of` null: of what the row names. */
  | { as: Quantity; unit: string; of: Subject | null };

export const isQuantity = (use: ColumnUse): use is Extract<ColumnUse, { as: Quantity }> =>
  (QUANTITIES as readonly string[]).includes(use.as);

export interface Layout {
  /** One a column of the file. */
  columns: readonly ColumnUse[];
  hasHeader: boolean;
  /** Of times that name none themselves: an IANA zone. */
  timeZone: string;
  /** In 3/4/2026; null: not decided, and asked where it matters. */
  dayFirst: boolean | null;
  decimalMark: DecimalMark | null;
}

/** The names that a file may use at a site. */
export interface KnownSubjects {
  strings: readonly { name: string; slots: number }[];
  inverters: readonly { name: string; inputs: readonly number[] }[];
}

/** Whether a column says of what a row is. */
export const namesRows = ({ columns }: Pick<Layout, 'columns'>): boolean =>
  columns.some((c) => c.as === 'string' || c.as === 'inverter');

/** Why a file can't be read with this layout yet; null: it can. `headers`: what its columns are called. */
export function layoutFault(layout: Pick<Layout, 'columns'>, headers: readonly string[] = []): string | null {
  const { columns } = layout;
  const has = (as: ColumnUse['as']) => columns.some((c) => c.as === as);
  if (!has('at') && !has('date')) return layoutSaid.noTime;
  const values = columns.filter(isQuantity);
  if (values.length === 0) return layoutSaid.noValues;
  const loose = columns.flatMap((c, i) =>
    isQuantity(c) && c.of === null ? [headers[i] ?? layoutSaid.column(i + 1)] : [],
  );
  const [first] = loose;
  if (!namesRows(layout) && first !== undefined) return layoutSaid.ofWhat(first, loose.length - 1);
  if (has('input') && !has('inverter')) return layoutSaid.inputNeedsInverter;
  if (has('position') && !has('string')) return layoutSaid.positionNeedsString;
  const seen = new Set<string>();
  for (const c of values) {
    const key = `${c.as} ${c.of ? subjectKey(c.of) : ''}`;
    if (seen.has(key)) return layoutSaid.twice(c.as, c.of);
    seen.add(key);
  }
  return null;
}
