import { Choice } from '../../components/ui/Choice';
import { Sheet } from '../../components/ui/Sheet';
import {
  IMPORT_COLUMNS,
  REQUIRED_COLUMNS,
  type ColumnMatch,
  type ImportColumn,
} from '../../domain/commissioning/import/columns';
import { COLUMN_LABELS } from '../../words/domain-import';
import type { FileFacts } from './desk';
import { columnsSheet } from '../../words/import';

interface Props {
  facts: FileFacts;
  match: ColumnMatch;
  onMatch: (column: ImportColumn, index: number | null) => void;
}

/** Different values of a column. */
const SHOWN = 3;

/** Which column of the file is which of ours, guessed and changeable, with what stands in it. */
export function ColumnsSheet({ facts, match, onMatch }: Props) {
  const used = new Set(Object.values(match));
  const unused = facts.headers.filter((_, i) => !used.has(i));
  return (
    <Sheet
      id="columns"
      title={columnsSheet.columns}
      aside={
        unused.length > 0 ? columnsSheet.notUsed(unused.slice(0, 6).join(', '), unused.length) : undefined
      }
    >
      <div className="grid gap-x-8 gap-y-3 md:grid-cols-2 xl:grid-cols-3">
        {IMPORT_COLUMNS.map((column) => {
          const index = match[column];
          const needed = REQUIRED_COLUMNS.includes(column);
          const values = index === null ? [] : facts.samples.map((row) => (row[index] ?? '').trim());
          const shown = [...new Set(values.filter((v) => v !== ''))]
            .slice(0, SHOWN)
            .map((v) => (v.length > 24 ? `${v.slice(0, 23)}…` : v));
          return (
            <Choice
              key={column}
              label={columnsSheet.columnNeeded(COLUMN_LABELS[column], needed)}
              value={index === null ? '' : String(index)}
              options={[
                { value: '', label: needed ? columnsSheet.chooseAColumn : columnsSheet.notInTheFile },
                ...facts.headers.map((header, i) => ({ value: String(i), label: header })),
              ]}
              onChange={(value) => onMatch(column, value === '' ? null : Number(value))}
              error={needed && index === null ? columnsSheet.chooseColumn(COLUMN_LABELS[column]) : null}
              hint={
                index === null
                  ? undefined
                  : shown.length > 0
                    ? shown.join(' · ')
                    : columnsSheet.emptyInTheFirst
              }
            />
          );
        })}
      </div>
    </Sheet>
  );
}
