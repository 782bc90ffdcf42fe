import { ROWS_AT_ONCE } from '../../components/ui/LongTable';
import { lowRows, type LowOutput, type LowOutputView } from '../../schemas/api/low-output-rows';
import { lowFinding } from '../../words/low-output-sentences';

/** What is told of all low strings, however the view filters them. */
export interface Told {
  finding: { heading: string; sentence: string };
  /** Low strings there are. */
  rows: number;
  /** To choose from, by name. */
  sites: SiteName[];
  /** Whether anything is worth money. */
  priced: boolean;
}
interface SiteName {
  id: string;
  name: string;
}

/** The same while a browser has only the first ones: the rest comes when somebody asks for it. */
export interface Whole extends Told {
  /** Those that the view asks for. */
  shown: number;
}

/** What the page says of all that it has. */
export const toldOf = (low: LowOutput): Told => ({
  finding: lowFinding(low),
  rows: low.rows.length,
  sites: [...new Map(low.rows.map(({ site: { id, name } }) => [id, { id, name }])).values()].sort((a, b) =>
    a.name.localeCompare(b.name),
  ),
  priced: low.currency !== null && low.rows.some((r) => r.moneyDay !== null),
});

/** What the page of a large fleet is sent with: the rows that it shows first. A short list goes as it is. */
export function firstPage(low: LowOutput, view: LowOutputView): { low: LowOutput; whole: Whole | null } {
  if (low.rows.length <= ROWS_AT_ONCE) return { low, whole: null };
  const rows = lowRows(low.rows, view);
  return {
    low: { ...low, rows: rows.slice(0, ROWS_AT_ONCE), unjudgedSites: [] },
    whole: { ...toldOf(low), shown: rows.length },
  };
}
