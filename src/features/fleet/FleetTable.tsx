import { useMemo } from 'react';
import { Notice } from '../../components/ui/Notice';
import { Table, type Column } from '../../components/ui/Table';
import { Button } from '../../components/ui/Button';
import { useReaderZone } from '../../components/ui/reader-zone';
import { MixBar } from '../../drawings/MixBar';
import { number, percent, power } from '../../drawings/numbers';
import type { FleetView } from '../../schemas/api/fleet';
import { paths } from '../../schemas/paths';
import type { FleetLine } from './list';
import { openAt } from './need';
import { readsFromA } from './view';
import { fleetTable } from '../../words/fleet';

const STAGE = { commissioning: fleetTable.commissioning, operating: fleetTable.operating } as const;

function Open({ line, now }: { line: FleetLine; now: Date }) {
  const words = openAt(line.site, line.causes, now, useReaderZone());
  return <span className={words === 'nothing' ? 'text-ink-2' : ''}>{words}</span>;
}

const columnsAt = (now: Date): Column<FleetLine>[] => [
  {
    key: 'name',
    label: fleetTable.site,
    sortable: true,
    cell: (line) => (
      <>
        <a
          href={paths.site(line.site.id)}
          className="target inline-flex items-center text-[15px] font-semibold tracking-[-0.01em] hover:underline"
        >
          {line.site.name}
        </a>
        <div className="mt-0.5 space-y-1.5 sm:hidden">
          <MixBar id={`narrow-${line.site.id}`} counts={line.site.counts} width={190} />
          <p className="text-sm text-ink-2">
            {fleetTable.stageUnits(STAGE[line.site.stage], line.site.counts.units)}
          </p>
          <p className="text-sm">
            <Open line={line} now={now} />
          </p>
        </div>
      </>
    ),
  },
  {
    key: 'stage',
    label: fleetTable.stage,
    sortable: true,
    from: 'lg',
    cell: (line) => <span className="text-ink-2">{STAGE[line.site.stage]}</span>,
  },
  {
    key: 'units',
    label: fleetTable.units,
    sortable: true,
    from: 'sm',
    cell: (line) => (
      <div className="flex items-center justify-between gap-4">
        <MixBar id={`wide-${line.site.id}`} counts={line.site.counts} />
        <span>{number(line.site.counts.units)}</span>
      </div>
    ),
  },
  {
    key: 'need',
    label: fleetTable.open,
    sortable: true,
    from: 'sm',
    cell: (line) => <Open line={line} now={now} />,
  },
  {
    key: 'ratio',
    label: fleetTable.performanceRatio30D,
    numeric: true,
    sortable: true,
    from: 'md',
    cell: (line) => percent(line.site.performanceRatio30d, 1),
  },
  {
    key: 'power',
    label: fleetTable.now,
    numeric: true,
    sortable: true,
    className: 'max-sm:align-top max-sm:pt-[18px]',
    cell: (line) => power(line.site.power),
  },
];

interface Props {
  lines: readonly FleetLine[];
  view: FleetView;
  now: Date;
  onChange: (some: Partial<FleetView>) => void;
  onClear: () => void;
}

export function FleetTable({ lines, view, now, onChange, onClear }: Props) {
  const ascending = readsFromA(view.sort) ? view.order === 'down' : view.order === 'up';
  const columns = useMemo(() => columnsAt(now), [now]);
  return (
    <Table
      caption={fleetTable.sitesWithTheirUnits}
      columns={columns}
      rows={lines}
      rowKey={(line) => line.site.id}
      sorting={{ key: view.sort, descending: !ascending }}
      onSort={({ key }) => {
        const sort = key as FleetView['sort'];
        onChange({ sort, order: sort === view.sort && view.order === 'down' ? 'up' : 'down' });
      }}
      empty={
        <div className="py-3">
          <Notice
            kind="empty"
            title={fleetTable.noSiteMatches}
            action={<Button onClick={onClear}>{fleetTable.showAllSites}</Button>}
          >
            {fleetTable.anotherWordStageOr}
          </Notice>
        </div>
      }
    />
  );
}
