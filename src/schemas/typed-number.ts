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
  const span = `from ${written(min)} to ${written(max)}${unit ? ` ${unit}` : ''}`;
  const bare = text
    .replace(/[\s\u00a0\u202f]/g, '')
    .replace(/[−–]/g, '-')
    .replace(/^\+(?=[\d.,])/, '');
  const plain = unit && bare.toLowerCase().endsWith(unit.toLowerCase()) ? bare.slice(0, -unit.length) : bare;
  const refuse = (fault: string): TypedNumber => ({ value: null, fault });
  if (plain === '') return refuse(`${name}: type a number ${span}.`);
  if (/[.,].*[.,]/.test(plain))
    return refuse(
      `${name}: "${text.trim()}" has two marks. Type it with one comma or point, before the decimals.`,
    );
  const point = plain.replace(',', '.');
  if (!/^-?(\d+\.?\d*|\.\d+)$/.test(point))
    return refuse(`${name}: "${text.trim()}" is no number. Type a number ${span}.`);
  const value = Number(point) + 0;
  if (whole && !Number.isInteger(value))
    return refuse(`${name}: ${written(value)} is no whole number. Type one ${span}.`);
  if (!(value >= min && value <= max))
    return refuse(`${name}: ${written(value)} is outside what is possible. Type a number ${span}.`);
  return { value, fault: null };
}

const written = (n: number): string => String(n).replace('-', '−');
