import type { SiteDesignItem } from '../../schemas/api/design';
import { CHECK_WORDS, OUTCOME_WORDS } from '../../words/design-sentences';

interface CsvColumn {
  header: string;
  value: (finding: SiteDesignItem) => string | number | null;
}

const rounded = (value: number | null): number | null =>
  value === null ? null : Math.round(100 * value) / 100;

export const DESIGN_COLUMNS: CsvColumn[] = [
  { header: 'outcome', value: (f) => OUTCOME_WORDS[f.outcome] },
  { header: 'check', value: (f) => CHECK_WORDS[f.check] },
  { header: 'strings', value: (f) => f.strings.map((s) => s.name).join(' ') },
  { header: 'figure', value: (f) => rounded(f.value) },
  { header: 'limit', value: (f) => rounded(f.limit) },
  { header: 'unit', value: (f) => f.unit },
  { header: 'matter of', value: (f) => (f.safety ? 'safety or maker’s limit' : 'energy') },
  { header: 'found', value: (f) => f.words },
  { header: 'clause', value: (f) => f.clause },
  { header: 'remedy', value: (f) => f.remedy },
  { header: 'alternatives', value: (f) => f.alternatives.join(' / ') },
];
