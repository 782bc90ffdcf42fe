import type { SiteDesignItem } from '../../schemas/api/design';
import { CHECK_WORDS, OUTCOME_WORDS } from '../../words/design-sentences';
import { designHeads } from '../../words/csv-heads-site';

interface CsvColumn {
  header: string;
  value: (finding: SiteDesignItem) => string | number | null;
}

const rounded = (value: number | null): number | null =>
  value === null ? null : Math.round(100 * value) / 100;

export const DESIGN_COLUMNS: CsvColumn[] = [
  { header: designHeads.outcome, value: (f) => OUTCOME_WORDS[f.outcome] },
  { header: designHeads.check, value: (f) => CHECK_WORDS[f.check] },
  { header: designHeads.strings, value: (f) => f.strings.map((s) => s.name).join(' ') },
  { header: designHeads.figure, value: (f) => rounded(f.value) },
  { header: designHeads.limit, value: (f) => rounded(f.limit) },
  { header: designHeads.unit, value: (f) => f.unit },
  { header: designHeads.matterOf, value: (f) => (f.safety ? designHeads.safety : designHeads.energy) },
  { header: designHeads.found, value: (f) => f.words },
  { header: designHeads.clause, value: (f) => f.clause },
  { header: designHeads.remedy, value: (f) => f.remedy },
  { header: designHeads.alternatives, value: (f) => f.alternatives.join(' / ') },
];
