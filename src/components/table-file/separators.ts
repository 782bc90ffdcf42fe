import { tableSeparators } from '../../words/table-file';
/** What stands between the cells of a row. */
export const SEPARATORS = ['\t', ';', ',', '|'] as const;
export type Separator = (typeof SEPARATORS)[number];
export const SEPARATOR_NAMES: Record<Separator, string> = {
  '\t': tableSeparators.tab,
  ';': tableSeparators.semicolon,
  ',': tableSeparators.comma,
  '|': tableSeparators.bar,
};
