import { memo, type KeyboardEvent, type ReactNode } from 'react';

export interface Column<Row> {
  key: string;
  label: string;
  cell: (row: Row) => ReactNode;
  /** Figures stand right. */
  numeric?: boolean;
  sortable?: boolean;
  /** Not shown under this width; what a phone must show has none. */
  from?: 'sm' | 'md' | 'lg';
  className?: string;
}
export interface Sorting {
  key: string;
  descending: boolean;
}
export interface TableProps<Row> {
  caption: string;
  columns: readonly Column<Row>[];
  rows: readonly Row[];
  rowKey: (row: Row) => string;
  sorting?: Sorting | null;
  onSort?: (sorting: Sorting) => void;
  empty?: ReactNode;
}

const FROM = { sm: 'hidden sm:table-cell', md: 'hidden md:table-cell', lg: 'hidden lg:table-cell' } as const;

/** Arrow keys, Home and End go from row to row: focus moves to the first link or button of the row. */
function moveByArrow(event: KeyboardEvent<HTMLTableSectionElement>): void {
  if (!(event.target instanceof HTMLElement) || event.target.matches('input, select, textarea')) return;
  const rows = [...event.currentTarget.rows];
  const at = rows.findIndex((row) => row.contains(event.target as Node));
  const to = { ArrowDown: at + 1, ArrowUp: at - 1, Home: 0, End: rows.length - 1 }[event.key];
  if (to === undefined) return;
  const next = rows[Math.min(rows.length - 1, Math.max(0, to))];
  const target = next?.querySelector<HTMLElement>('a[href], button') ?? next;
  if (!target) return;
  event.preventDefault();
  target.focus();
}

function RowCells<Row>({ row, columns }: Pick<TableProps<Row>, 'columns'> & { row: Row }) {
  return (
    <tr tabIndex={-1} className="border-b border-rule-faint last:border-b-0">
      {columns.map((column) => (
        <td
          key={column.key}
          className={`py-2.5 pr-4 align-middle last:pr-0 ${column.numeric ? 'whitespace-nowrap text-right' : ''} ${column.from ? FROM[column.from] : ''} ${column.className ?? ''}`}
        >
          {column.cell(row)}
        </td>
      ))}
    </tr>
  );
}
/** Drawn again when its entry or the columns are other objects: keep both where nothing came. */
const TableRow = memo(RowCells) as typeof RowCells;

/** A table with sortable heads and rows that the arrow keys walk. */
export function Table<Row>({ caption, columns, rows, rowKey, sorting, onSort, empty }: TableProps<Row>) {
  return (
    <div className="overflow-x-auto">
      <table className="w-full border-collapse text-left">
        <caption className="sr-only">{caption}</caption>
        <thead>
          <tr className="border-b border-rule">
            {columns.map((column) => {
              const sorted = sorting?.key === column.key ? sorting : null;
              return (
                <th
                  key={column.key}
                  scope="col"
                  aria-sort={sorted ? (sorted.descending ? 'descending' : 'ascending') : undefined}
                  className={`py-2 pr-4 align-middle text-sm font-medium text-ink-2 last:pr-0 ${column.numeric ? 'text-right' : ''} ${column.from ? FROM[column.from] : ''}`}
                >
                  {column.sortable && onSort ? (
                    <button
                      type="button"
                      className="target -my-2 inline-flex items-center gap-1 hover:text-ink"
                      onClick={() =>
                        onSort({ key: column.key, descending: sorted ? !sorted.descending : false })
                      }
                    >
                      {column.label}
                      <span
                        aria-hidden="true"
                        className={`w-3 text-center text-xs ${column.numeric ? 'order-first' : ''}`}
                      >
                        {sorted ? (sorted.descending ? '↓' : '↑') : '\u00a0'}
                      </span>
                    </button>
                  ) : (
                    column.label
                  )}
                </th>
              );
            })}
          </tr>
        </thead>
        <tbody onKeyDown={moveByArrow}>
          {rows.map((row) => (
            <TableRow key={rowKey(row)} row={row} columns={columns} />
          ))}
        </tbody>
      </table>
      {rows.length === 0 && empty}
    </div>
  );
}
