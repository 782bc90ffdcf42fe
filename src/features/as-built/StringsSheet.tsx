import { useMemo } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Notice } from '../../components/ui/Notice';
import { SearchInput } from '../../components/ui/SearchInput';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { Table, type Column } from '../../components/ui/Table';
import type { AsBuilt, AsBuiltView, StringBuilt } from '../../schemas/api/as-built';
import { nameOf } from '../../schemas/as-built-values';
import { paths } from '../../schemas/paths';
import { PART_WORDS, type PartKind } from '../../domain/commissioning/as-built/parts';
import { gapsOf, listed, listedStrings, missingForStrings } from './finding';
import { SlotsStrip } from './SlotsStrip';

export const VIEW_DEFAULTS: AsBuiltView = { find: '', show: 'all', sort: 'name', order: 'up', string: '' };
const SHOWS = [
  { value: 'all', label: 'All' },
  { value: 'gaps', label: 'Without serials' },
] as const;

interface Props {
  built: AsBuilt;
  view: AsBuiltView;
  mayWrite: boolean;
  /** Strings with something typed and not saved. */
  unsaved: ReadonlySet<string>;
  onView: (some: Partial<AsBuiltView>, how?: 'typed' | 'chosen') => void;
  onOpen: (string: string) => void;
  onAdd: (kind: PartKind) => void;
}

/** Every string of the site, with the slots that have a serial and those that don't. */
export function StringsSheet({ built, view, mayWrite, unsaved, onView, onOpen, onAdd }: Props) {
  const rows = useMemo(() => listedStrings(built, view), [built, view]);
  const missing = missingForStrings(built);
  const columns: Column<StringBuilt>[] = [
    {
      key: 'name',
      label: 'String',
      sortable: true,
      cell: (s) => (
        <button
          type="button"
          className="target -my-2 inline-flex items-center text-left font-medium text-petrol hover:underline"
          onClick={() => onOpen(s.id)}
        >
          {s.name}
          {unsaved.has(s.id) && <span className="ml-2 text-sm text-rust-ink">not saved</span>}
        </button>
      ),
    },
    {
      key: 'gaps',
      label: 'Slots with a serial',
      sortable: true,
      cell: (s) => <SlotsStrip slots={s.slots} />,
    },
    {
      key: 'slots',
      label: 'Serials',
      numeric: true,
      sortable: true,
      cell: (s) => `${s.slots.length - gapsOf(s)} / ${s.slots.length}`,
    },
    {
      key: 'plane',
      label: 'Plane',
      sortable: true,
      from: 'sm',
      cell: (s) => nameOf(built, 'plane', s.plane),
    },
    {
      key: 'input',
      label: 'Input',
      sortable: true,
      from: 'md',
      cell: (s) => nameOf(built, 'input', s.input),
    },
    { key: 'unitType', label: 'Unit type', from: 'lg', cell: (s) => nameOf(built, 'unit_type', s.unitType) },
    { key: 'zone', label: 'Zone', from: 'lg', cell: (s) => nameOf(built, 'zone', s.zone) },
  ];
  return (
    <Sheet id="strings" title="Strings" flush>
      {built.strings.length > 0 && (
        <div className="no-print mb-3 flex flex-wrap items-center gap-x-5 gap-y-2">
          <SearchInput
            label="Find a string by name, serial or place on the roof"
            placeholder="Name, serial or place"
            value={view.find}
            onChange={(typed) => onView({ find: typed }, 'typed')}
          />
          <Segmented
            label="Which strings"
            options={SHOWS}
            value={view.show}
            onChange={(show) => onView({ show })}
          />
          <ButtonLink href={paths.api.asBuiltCsv(built.site.id)} download className="ml-auto !text-sm">
            CSV
          </ButtonLink>
        </div>
      )}
      {built.strings.length > 0 ? (
        <Table
          caption="Strings of this site"
          columns={columns}
          rows={rows}
          rowKey={(s) => s.id}
          sorting={{ key: view.sort, descending: view.order === 'down' }}
          onSort={(s) => onView({ sort: s.key as AsBuiltView['sort'], order: s.descending ? 'down' : 'up' })}
          empty={
            <Notice
              kind="empty"
              title="No string fits"
              action={<Button onClick={() => onView({ find: '', show: 'all' })}>Show all</Button>}
            />
          }
        />
      ) : (
        <Notice kind="empty" title="No strings yet">
          {missing.length > 0
            ? `Enter ${listed(missing.map((m) => m.words))} first: a string names them.`
            : 'Several alike are entered at once: their names are counted up.'}
        </Notice>
      )}
      {mayWrite && (
        <div className="mt-4 flex flex-wrap gap-2">
          {missing
            .flatMap((m) => m.add)
            .map((kind) => (
              <Button key={kind} weight="primary" onClick={() => onAdd(kind)}>
                Add {PART_WORDS[kind].a}
              </Button>
            ))}
          {missing.some((m) => m.add.length === 0) && (
            <ButtonLink href={paths.equipment()}>Open the catalogue</ButtonLink>
          )}
          {missing.length === 0 && (
            <Button weight="primary" onClick={() => onAdd('string')}>
              Add strings
            </Button>
          )}
        </div>
      )}
    </Sheet>
  );
}
