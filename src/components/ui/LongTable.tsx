import { useState } from 'react';
import { ShowMore } from './ShowMore';
import { Table, type TableProps } from './Table';

/** Rows before somebody asks for more. */
const ROWS_AT_ONCE = 50;

interface Props<Row> extends TableProps<Row> {
  /** What the rows are: "sites". */
  what: string;
}

/** A table that may hold a large fleet: it begins with its first rows. In an island, for its button. */
export function LongTable<Row>({ what, rows, ...table }: Props<Row>) {
  const [most, setMost] = useState(ROWS_AT_ONCE);
  return (
    <>
      <Table {...table} rows={rows.slice(0, most)} />
      <ShowMore
        shown={Math.min(most, rows.length)}
        of={rows.length}
        what={what}
        onMore={() => setMost(most + 4 * ROWS_AT_ONCE)}
      />
    </>
  );
}
