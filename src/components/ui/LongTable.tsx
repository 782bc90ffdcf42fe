import { useState } from 'react';
import { ShowMore } from './ShowMore';
import { Table, type TableProps } from './Table';

/** Rows before somebody asks for more. */
export const ROWS_AT_ONCE = 50;

interface Props<Row> extends TableProps<Row> {
  /** What the rows are: "sites". */
  what: string;
  /** How many there are where not all are here yet; then somebody asks for the others, too. */
  of?: number;
  onMore?: () => void;
}

/** A table that may hold a large fleet: it begins with its first rows. In an island, for its button. */
export function LongTable<Row>({ what, rows, of, onMore, ...table }: Props<Row>) {
  const [most, setMost] = useState(ROWS_AT_ONCE);
  return (
    <>
      <Table {...table} rows={rows.slice(0, most)} />
      <ShowMore
        shown={Math.min(most, rows.length)}
        of={of ?? rows.length}
        what={what}
        onMore={() => {
          setMost(most + 4 * ROWS_AT_ONCE);
          onMore?.();
        }}
      />
    </>
  );
}
