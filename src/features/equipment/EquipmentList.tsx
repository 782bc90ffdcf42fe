import { useMemo, type ReactNode } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { SearchInput } from '../../components/ui/SearchInput';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { Table } from '../../components/ui/Table';
import { EQUIPMENT_FAMILIES } from '../../domain/equipment/families';
import { withQuery } from '../../lib/api';
import { useViewInUrl } from '../../lib/view-in-url';
import type { Catalogue, EquipmentView } from '../../schemas/api/equipment';
import { paths } from '../../schemas/paths';
import { EQUIPMENT_DEFAULTS, shownItems } from './list';
import { listColumns } from './list-columns';
import { FAMILY_LABELS, ONE, listFinding } from '../../words/equipment-sentences';
import { equipmentListWords } from '../../words/equipment';

interface Props {
  catalogue: Catalogue;
  view: EquipmentView;
  mayWrite: boolean;
  children?: ReactNode;
}

const SHOWS = [
  { value: 'in_use', label: equipmentListWords.current },
  { value: 'archived', label: equipmentListWords.archived },
  { value: 'all', label: equipmentListWords.all },
] as const;

export function FamilyNav({ current }: { current: Catalogue['family'] }) {
  return (
    <nav aria-label={equipmentListWords.familiesOfEquipment} className="mb-5 border-b border-rule">
      <ul className="flex flex-wrap gap-x-5">
        {EQUIPMENT_FAMILIES.map((family) => (
          <li key={family}>
            <a
              href={paths.equipmentList(family)}
              aria-current={family === current ? 'page' : undefined}
              className={`target relative flex items-center text-[15px] ${family === current ? 'font-semibold text-ink after:absolute after:inset-x-0 after:-bottom-px after:h-[2px] after:bg-ink' : 'text-ink-2 hover:text-ink'}`}
            >
              {FAMILY_LABELS[family]}
            </a>
          </li>
        ))}
      </ul>
    </nav>
  );
}

/** One family of the catalogue: what there is, how it is used. */
export function EquipmentList({ catalogue, view: initialView, mayWrite, children }: Props) {
  const { family } = catalogue;
  const [view, change] = useViewInUrl<EquipmentView>(initialView, EQUIPMENT_DEFAULTS);
  const { heading, sentence } = listFinding(catalogue);
  const rows = useMemo(() => shownItems(catalogue, view), [catalogue, view]);
  const columns = useMemo(() => listColumns(catalogue), [catalogue]);
  return (
    <>
      <FamilyNav current={family} />
      <Heading
        finding={heading}
        sentence={sentence}
        actions={
          mayWrite && (
            <>
              <ButtonLink weight="primary" href={paths.equipmentNew(family)}>
                {equipmentListWords.enterFamily(family, ONE[family])}
              </ButtonLink>
              <ButtonLink href={paths.equipmentImport(family)}>{equipmentListWords.importAFile}</ButtonLink>
            </>
          )
        }
      />
      <Sheet
        flush
        title={FAMILY_LABELS[family]}
        id="types"
        aside={equipmentListWords.rowsOfItems(rows.length, catalogue.items.length)}
      >
        <form
          action={paths.equipmentList(family)}
          className="no-print mb-3 flex flex-wrap items-center gap-x-5 gap-y-2"
          onSubmit={(event) => event.preventDefault()}
        >
          <SearchInput
            name="q"
            label={equipmentListWords.filterByName(FAMILY_LABELS[family])}
            placeholder={equipmentListWords.filterByName2}
            value={view.q}
            onChange={(typed) => change({ q: typed }, 'typed')}
          />
          <Segmented
            label={equipmentListWords.archivedTypes}
            name="show"
            options={SHOWS}
            value={view.show}
            onChange={(show) => change({ show })}
          />
          <ButtonLink
            href={withQuery(paths.api.equipmentCsv(family), view)}
            download
            className="ml-auto !text-sm"
          >
            CSV
          </ButtonLink>
        </form>
        <Table
          caption={equipmentListWords.ofTheCatalogueWith(FAMILY_LABELS[family])}
          columns={columns}
          rows={rows}
          rowKey={(row) => row.id}
          sorting={{ key: view.sort, descending: view.order === 'down' }}
          onSort={({ key, descending }) => change({ sort: key, order: descending ? 'down' : 'up' })}
          empty={
            <div className="py-3">
              <Notice
                kind="empty"
                title={
                  catalogue.items.length === 0
                    ? equipmentListWords.noYet(ONE[family])
                    : equipmentListWords.noMatches(ONE[family])
                }
                action={
                  catalogue.items.length > 0 && (
                    <Button onClick={() => change({ q: '', show: 'all' })}>
                      {equipmentListWords.showAll}
                    </Button>
                  )
                }
              >
                {catalogue.items.length === 0
                  ? equipmentListWords.enterTheFirstOr
                  : equipmentListWords.anotherWordMayOr}
              </Notice>
            </div>
          }
        />
      </Sheet>
      {children}
    </>
  );
}
