import { useState } from 'react';
import { isHazard } from '../../components/causes/words';
import { Table, type Column } from '../../components/ui/Table';
import { siteClock, useReaderZone } from '../../components/ui/reader-zone';
import { fullTime } from '../../drawings/times';
import type { CauseNow } from '../../schemas/api/now';
import { paths } from '../../schemas/paths';
import { unitsTable } from '../../words/shutdown';

type Unit = CauseNow['units'][number];
/** So many are listed at once; more open on demand. */
const AT_ONCE = 12;

const byName = new Intl.Collator('en', { numeric: true });
const byPlace = (a: Unit, b: Unit): number =>
  byName.compare(a.stringName, b.stringName) || (a.position ?? 0) - (b.position ?? 0);

/** The units of one cause, in the order in which a person walks them. */
export function UnitsTable({ cause, timeZone, now }: { cause: CauseNow; timeZone: string; now: string }) {
  const readerZone = useReaderZone();
  // what holds no hazard is drawn once it is opened: in an outage every site has a hundred units here
  const [open, setOpen] = useState(isHazard(cause));
  const units = [...cause.units].sort(byPlace);
  const columns: Column<Unit>[] = [
    {
      key: 'string',
      label: unitsTable.string,
      cell: (unit) => (
        <>
          <a
            href={`${paths.string(cause.siteId, unit.stringId)}${unit.position === null ? '' : `#position-${unit.position}`}`}
            className="target inline-flex min-w-[44px] items-center font-semibold hover:underline"
          >
            {unit.stringName}
          </a>
          <span className="block text-xs text-ink-2 sm:hidden">{unit.serial ?? ''}</span>
        </>
      ),
    },
    {
      key: 'position',
      label: unitsTable.position,
      numeric: true,
      cell: (unit) => unit.position ?? 'unknown',
    },
    { key: 'serial', label: unitsTable.serial, from: 'sm', cell: (unit) => unit.serial ?? '–' },
    {
      key: 'since',
      label: unitsTable.since,
      numeric: true,
      cell: (unit) => (
        <time dateTime={unit.since} title={fullTime(unit.since, timeZone)}>
          {siteClock(unit.since, now, timeZone, readerZone)}
        </time>
      ),
    },
  ];
  const table = (rows: readonly Unit[]) => (
    <Table
      caption={unitsTable.unitsCause(cause.headline)}
      columns={columns}
      rows={rows}
      rowKey={(unit) => `${unit.stringId} ${unit.position ?? '-'}`}
    />
  );
  if (units.length === 0) return null;
  if (units.length <= AT_ONCE) return table(units);
  return (
    <details onToggle={(event) => setOpen(open || event.currentTarget.open)}>
      <summary className="target inline-flex cursor-pointer items-center font-medium text-petrol hover:underline">
        {unitsTable.allByPosition(units.length)}
      </summary>
      {open && table(units)}
    </details>
  );
}
