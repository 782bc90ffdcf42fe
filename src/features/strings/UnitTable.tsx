import { useState } from 'react';
import { StateTag } from '../../components/states/StateTag';
import { lookOf } from '../../components/states/words';
import { Sheet } from '../../components/ui/Sheet';
import { Table, type Column, type Sorting } from '../../components/ui/Table';
import { SiteTime } from '../../components/ui/Time';
import { amperes, celsius, decibelMilliwatts, quantity } from '../../drawings/numbers';
import type { SlotNow } from '../../schemas/api/now';
import type { StringPage } from '../../schemas/api/string';
import { unitTable } from '../../words/strings';

const keyOf: Record<string, (slot: SlotNow) => string | number> = {
  position: (s) => s.position,
  serial: (s) => s.serial ?? '',
  state: (s) => lookOf(s.state, s.verdict).word,
  voltage: (s) => s.voltage ?? -Infinity,
  module: (s) => s.voltageIn ?? -Infinity,
  current: (s) => s.current ?? -Infinity,
  temperature: (s) => s.temperature ?? -Infinity,
  signal: (s) => s.signal ?? -Infinity,
  seen: (s) => s.seen ?? '',
};

export function sortSlots(slots: readonly SlotNow[], sorting: Sorting): SlotNow[] {
  const key = keyOf[sorting.key] ?? keyOf.position;
  const way = sorting.descending ? -1 : 1;
  return [...slots].sort((a, b) => {
    const x = key?.(a) ?? 0;
    const y = key?.(b) ?? 0;
    return (
      way * (typeof x === 'string' ? x.localeCompare(String(y)) : x - Number(y)) || a.position - b.position
    );
  });
}

function columnsFor(page: StringPage): Column<SlotNow>[] {
  const { measures } = page.unitType;
  const told = page.string.kind !== 'shutdown_only';
  const columns: Column<SlotNow>[] = [
    {
      key: 'position',
      label: unitTable.position,
      numeric: true,
      sortable: true,
      cell: (s) => <strong>{s.position}</strong>,
    },
    {
      key: 'state',
      label: unitTable.state,
      sortable: told,
      cell: (s) =>
        s.serial === null ? (
          <span className="text-ink-2">{unitTable.noUnit}</span>
        ) : (
          <StateTag state={s.state} verdict={s.verdict} />
        ),
    },
  ];
  if (measures === 'output' || measures === 'both')
    columns.push({
      key: 'voltage',
      label: unitTable.output,
      numeric: true,
      sortable: true,
      cell: (s) => quantity(s.voltage, 'V', 1),
    });
  if (measures === 'input' || measures === 'both')
    columns.push({
      key: 'module',
      label: unitTable.moduleSide,
      numeric: true,
      sortable: true,
      from: measures === 'both' ? 'sm' : undefined,
      cell: (s) => quantity(s.voltageIn, 'V', 1),
    });
  if (told)
    columns.push(
      {
        key: 'current',
        label: unitTable.current,
        numeric: true,
        sortable: true,
        from: 'sm',
        cell: (s) => amperes(s.current),
      },
      {
        key: 'temperature',
        label: unitTable.temperature,
        numeric: true,
        sortable: true,
        from: 'md',
        cell: (s) => celsius(s.temperature),
      },
      {
        key: 'signal',
        label: unitTable.signal,
        numeric: true,
        sortable: true,
        from: 'md',
        cell: (s) => decibelMilliwatts(s.signal),
      },
      { key: 'gateway', label: unitTable.heardBy, from: 'lg', cell: (s) => s.gateway ?? '–' },
      {
        key: 'seen',
        label: unitTable.lastReport,
        sortable: true,
        from: 'lg',
        cell: (s) => (s.seen ? <SiteTime at={s.seen} now={page.at} timeZone={page.site.timeZone} /> : '–'),
      },
    );
  columns.push(
    {
      key: 'serial',
      label: unitTable.serial,
      sortable: true,
      from: 'sm',
      cell: (s) => <span className="whitespace-nowrap">{s.serial ?? '–'}</span>,
    },
    {
      key: 'place',
      label: unitTable.onTheRoof,
      from: 'md',
      cell: (s) => <span className="text-ink-2">{s.roofPlace || '–'}</span>,
    },
  );
  return columns;
}

/** Every position with its newest readings. */
export function UnitTable({ page }: { page: StringPage }) {
  const [sorting, setSorting] = useState<Sorting>({ key: 'position', descending: false });
  return (
    <Sheet
      id="units"
      title={unitTable.unitsFromTheNegative}
      aside={`${page.unitType.name} · ${page.moduleType}`}
      flush
    >
      <Table
        caption={unitTable.unitsOfString(page.string.name)}
        columns={columnsFor(page)}
        rows={sortSlots(page.string.slots, sorting)}
        rowKey={(s) => String(s.position)}
        sorting={sorting}
        onSort={setSorting}
        empty={<p className="py-4 text-ink-2">{unitTable.noPositionIsEntered}</p>}
      />
    </Sheet>
  );
}
