/** What stands between the cells of a row. */
export const SEPARATORS = ['\t', ';', ',', '|'] as const;
export type Separator = (typeof SEPARATORS)[number];
export const SEPARATOR_NAMES: Record<Separator, string> = {
  '\t': 'tab',
  ';': 'semicolon ;',
  ',': 'comma ,',
  '|': 'bar |',
};
