/** Numbers as they stand in files of several countries. */
import { numberSaid } from '../../../words/domain-import';

export type DecimalMark = 'point' | 'comma';

export type ReadNumber =
  | { kind: 'number'; value: number }
  | { kind: 'empty' }
  /** Could be read two ways: with the mark before decimals, or before thousands. */
  | { kind: 'ambiguous'; asDecimal: number; asThousands: number }
  | { kind: 'fault'; message: string };

const plain = (text: string): string =>
  text
    .replace(/[\s\u00a0\u202f'’]/g, '')
    .replace(/[−–]/g, '-')
    .replace(/^\+(?=[\d.,])/, '');

const GROUPED_COMMA = /^-?\d{1,3}(,\d{3})+(\.\d*)?$/;
const GROUPED_POINT = /^-?\d{1,3}(\.\d{3})+(,\d*)?$/;

/** Which mark this text can only have meant before its decimals; null where it says nothing. */
function markOf(text: string): DecimalMark | null {
  const bare = plain(text);
  const commas = bare.split(',').length - 1;
  const points = bare.split('.').length - 1;
  if (!/^-?[\d.,]*\d[\d.,]*$/.test(bare)) return null;
  if (commas > 0 && points > 0) return bare.lastIndexOf(',') > bare.lastIndexOf('.') ? 'comma' : 'point';
  if (commas > 1) return 'point';
  if (points > 1) return 'comma';
  // one mark and three digits behind it says nothing, unless a lone zero stands before it
  if (commas === 1) return /^-?[1-9]\d{0,2},\d{3}$/.test(bare) ? null : 'comma';
  if (points === 1) return /^-?[1-9]\d{0,2}\.\d{3}$/.test(bare) ? null : 'point';
  return null;
}

/**
 * The decimal mark that the numbers of one column agree on; null where none of them says, or where they contradict each
 * other.
 */
export function decimalMarkOf(texts: Iterable<string>): DecimalMark | null {
  let agreed: DecimalMark | null = null;
  for (const text of texts) {
    const mark = markOf(text);
    if (mark === null || mark === agreed) continue;
    if (agreed !== null) return null;
    agreed = mark;
  }
  return agreed;
}

/**
 * The number in `text`. With `mark` given (asked from the person, or agreed on by the column) nothing is ambiguous.
 * Without it a comma stands before decimals where it can't stand before thousands; "1,234" is ambiguous; "1.234" is
 * read with the point before its decimals, the commoner of the two in exports.
 */
export function readNumber(text: string, mark: DecimalMark | null = null): ReadNumber {
  const bare = plain(text);
  if (bare === '' || bare === '-') return { kind: 'empty' };
  if (!/^-?[\d.,]*\d[\d.,]*$/.test(bare)) return { kind: 'fault', message: numberSaid.noNumber(text.trim()) };
  const own = mark ?? markOf(bare);
  if (own === null) {
    if (bare.includes(','))
      return {
        kind: 'ambiguous',
        asDecimal: Number(bare.replace(',', '.')),
        asThousands: Number(bare.replace(',', '')),
      };
    return { kind: 'number', value: Number(bare) + 0 };
  }
  const twoMarks: ReadNumber = { kind: 'fault', message: numberSaid.marks(text.trim()) };
  const [decimal, thousands, grouped] =
    own === 'point' ? (['.', ',', GROUPED_COMMA] as const) : ([',', '.', GROUPED_POINT] as const);
  if (bare.includes(thousands) && !grouped.test(bare)) return twoMarks;
  const value = Number(bare.replaceAll(thousands, '').replace(decimal, '.'));
  return Number.isFinite(value) ? { kind: 'number', value: value + 0 } : twoMarks;
}
