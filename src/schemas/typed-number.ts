import { typedNumbers } from '../words/fields-of-types';
/** Numbers as people type them. */

export type TypedNumber = { value: number; fault: null } | { value: null; fault: string };

export interface NumberRange {
  min: number;
  max: number;
  /** Only whole numbers. */
  whole?: boolean;
  unit?: string;
}

/**
 * The number in `text`: a comma or a point before the decimals, any minus sign, blanks and the unit forgiven. What is
 * no number, or lies outside `range`, comes back as a sentence with the remedy.
 */
export function typedNumber(text: string, name: string, range: NumberRange): TypedNumber {
  const { min, max, whole = false, unit = '' } = range;
  const span = typedNumbers.span(written(min), written(max), unit);
  const bare = text
    .replace(/[\s\u00a0\u202f]/g, '')
    .replace(/[−–]/g, '-')
    .replace(/^\+(?=[\d.,])/, '');
  const plain = unit && bare.toLowerCase().endsWith(unit.toLowerCase()) ? bare.slice(0, -unit.length) : bare;
  const refuse = (fault: string): TypedNumber => ({ value: null, fault });
  if (plain === '') return refuse(typedNumbers.typeNumber(name, span));
  if (/[.,].*[.,]/.test(plain)) return refuse(typedNumbers.twoMarks(name, text.trim()));
  const point = plain.replace(',', '.');
  if (!/^-?(\d+\.?\d*|\.\d+)$/.test(point)) return refuse(typedNumbers.noNumber(name, text.trim(), span));
  const value = Number(point) + 0;
  if (whole && !Number.isInteger(value)) return refuse(typedNumbers.notWhole(name, written(value), span));
  if (!(value >= min && value <= max)) return refuse(typedNumbers.outside(name, written(value), span));
  return { value, fault: null };
}

const written = (n: number): string => String(n).replace('-', '−');
