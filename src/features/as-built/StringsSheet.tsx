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
import type { PartKind } from '../../domain/commissioning/as-built/parts';
import { PART_WORDS } from '../../words/domain-as-built-parts';
import { gapsOf, listed, listedStrings, missingForStrings } from './finding';
import { SlotsStrip } from './SlotsStrip';
import { stringsSheet } from '../../words/as-built';

export const VIEW_DEFAULTS: AsBuiltView = { find: '', show: 'all', sort: 'name', order: 'up', string: '' };
const SHOWS = [
  { value: 'all', label: stringsSheet.all },
  { value: 'gaps', label: stringsSheet.withoutSerials },
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
      label: stringsSheet.string,
      sortable: true,
      cell: (s) => (
        <button
          type="button"
          className="target -my-2 inline-flex items-center text-left font-medium text-petrol hover:underline"
          onClick={() => onOpen(s.id)}
        >
          {s.name}
          {unsaved.has(s.id) && <span className="ml-2 text-sm text-rust-ink">{stringsSheet.notSaved}</span>}
        </button>
      ),
    },
    {
      key: 'gaps',
      label: stringsSheet.slotsWithASerial,
      sortable: true,
      cell: (s) => <SlotsStrip slots={s.slots} />,
    },
    {
      key: 'slots',
      label: stringsSheet.serials,
      numeric: true,
      sortable: true,
      cell: (s) => `${s.slots.length - gapsOf(s)} / ${s.slots.length}`,
    },
    {
      key: 'plane',
      label: stringsSheet.plane,
      sortable: true,
      from: 'sm',
      cell: (s) => nameOf(built, 'plane', s.plane),
    },
    {
      key: 'input',
      label: stringsSheet.input,
      sortable: true,
      from: 'md',
      cell: (s) => nameOf(built, 'input', s.input),
    },
    {
      key: 'unitType',
      label: stringsSheet.unitType,
      from: 'lg',
      cell: (s) => nameOf(built, 'unit_type', s.unitType),
    },
    { key: 'zone', label: stringsSheet.zone, from: 'lg', cell: (s) => nameOf(built, 'zone', s.zone) },
  ];
  return (
    <Sheet id="strings" title={stringsSheet.strings} flush>
      {built.strings.length > 0 && (
        <div className="no-print mb-3 flex flex-wrap items-center gap-x-5 gap-y-2">
          <SearchInput
            label={stringsSheet.findAStringBy}
            placeholder={stringsSheet.nameSerialOrPlace}
            value={view.find}
            onChange={(typed) => onView({ find: typed }, 'typed')}
          />
          <Segmented
            label={stringsSheet.whichStrings}
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
          caption={stringsSheet.stringsOfThisSite}
          columns={columns}
          rows={rows}
          rowKey={(s) => s.id}
          sorting={{ key: view.sort, descending: view.order === 'down' }}
          onSort={(s) => onView({ sort: s.key as AsBuiltView['sort'], order: s.descending ? 'down' : 'up' })}
          empty={
            <Notice
              kind="empty"
              title={stringsSheet.noStringFits}
              action={
                <Button onClick={() => onView({ find: '', show: 'all' })}>{stringsSheet.showAll}</Button>
              }
            />
          }
        />
      ) : (
        <Notice kind="empty" title={stringsSheet.noStringsYet}>
          {missing.length > 0
            ? stringsSheet.enterFirstStringNames(listed(missing.map((m) => m.words)))
            : stringsSheet.severalAlikeAreEntered}
        </Notice>
      )}
      {mayWrite && (
        <div className="mt-4 flex flex-wrap gap-2">
          {missing
            .flatMap((m) => m.add)
            .map((kind) => (
              <Button key={kind} weight="primary" onClick={() => onAdd(kind)}>
                {stringsSheet.addA(PART_WORDS[kind].a)}
              </Button>
            ))}
          {missing.some((m) => m.add.length === 0) && (
            <ButtonLink href={paths.equipment()}>{stringsSheet.openTheCatalogue}</ButtonLink>
          )}
          {missing.length === 0 && (
            <Button weight="primary" onClick={() => onAdd('string')}>
              {stringsSheet.addStrings}
            </Button>
          )}
        </div>
      )}
    </Sheet>
  );
}
