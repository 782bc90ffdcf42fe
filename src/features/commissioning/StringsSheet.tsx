import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { Table, type Column } from '../../components/ui/Table';
import { ButtonLink } from '../../components/ui/Button';
import { Notice } from '../../components/ui/Notice';
import { Comb } from '../../drawings/Comb';
import { decibelMilliwatts } from '../../drawings/numbers';
import { useViewInUrl } from '../../lib/view-in-url';
import { paths } from '../../schemas/paths';
import type { RollCallView } from '../../schemas/api/roll-call';
import type { RollTally, StringTally } from './tally';
import { LIST_DEFAULTS, heardSlots, listedStrings, sortingOf } from './list';
import { stringsSheet } from '../../words/commissioning';

interface Props {
  siteId: string;
  tally: RollTally;
  view: RollCallView;
}

/** The roll by string: a comb each, heard over roster, the weakest signal. */
export function StringsSheet({ siteId, tally, view: initial }: Props) {
  const [view, change] = useViewInUrl(initial, LIST_DEFAULTS);
  const columns: Column<StringTally>[] = [
    {
      key: 'name',
      label: stringsSheet.string,
      sortable: true,
      cell: (s) => (
        <a
          href={paths.string(siteId, s.string.id)}
          className="target inline-flex items-center font-semibold hover:underline"
        >
          {s.string.name}
        </a>
      ),
    },
    {
      key: 'units',
      label: stringsSheet.unitsFromTheNegative,
      cell: (s) => <Comb id={`comb-${s.string.id}`} slots={heardSlots(s)} width={252} />,
    },
    {
      key: 'heard',
      label: stringsSheet.heard,
      numeric: true,
      sortable: true,
      cell: (s) => `${s.heard} / ${s.units.length}`,
    },
    {
      key: 'signal',
      label: stringsSheet.weakestSignal,
      numeric: true,
      sortable: true,
      from: 'sm',
      cell: (s) => (s.weakest ? decibelMilliwatts(s.weakest.signal) : 'none'),
    },
  ];
  const rows = listedStrings(tally.strings, view);
  return (
    <Sheet
      id="strings"
      title={stringsSheet.strings}
      flush
      aside={
        <div className="flex flex-wrap items-center gap-x-4 gap-y-1">
          <Segmented
            label={stringsSheet.whichStrings}
            options={[
              { value: 'all', label: stringsSheet.allStrings(tally.strings.length) },
              {
                value: 'missing',
                label: stringsSheet.stillMissingUnits(
                  tally.strings.filter((s) => s.heard < s.units.length).length,
                ),
              },
            ]}
            value={view.strings}
            onChange={(strings) => change({ strings })}
          />
          <ButtonLink href={paths.api.rollCallCsv(siteId)} download>
            {stringsSheet.unitsAsCsv}
          </ButtonLink>
        </div>
      }
    >
      <Table
        caption={stringsSheet.rollCallByString}
        columns={columns}
        rows={rows}
        rowKey={(s) => s.string.id}
        sorting={sortingOf(view)}
        onSort={(s) => change({ sort: s.key as RollCallView['sort'], order: s.descending ? 'down' : 'up' })}
        empty={<Notice kind="empty" title={stringsSheet.noStringIsMissing} />}
      />
      {tally.mute > 0 && (
        <p className="mt-3 text-sm text-ink-2">{stringsSheet.unitsOfShutdownOnly(tally.mute)}</p>
      )}
      {tally.emptySlots > 0 && (
        <p className="mt-3 text-sm text-ink-2">{stringsSheet.noSerialOnThe(tally.emptySlots)}</p>
      )}
    </Sheet>
  );
}
