import { memo, useDeferredValue, useMemo, useState } from 'react';
import { StateTag } from '../../components/states/StateTag';
import { LongTable } from '../../components/ui/LongTable';
import { Notice } from '../../components/ui/Notice';
import { SearchInput } from '../../components/ui/SearchInput';
import { Sheet } from '../../components/ui/Sheet';
import type { Column } from '../../components/ui/Table';
import { Tag } from '../../components/ui/Tag';
import { Comb } from '../../drawings/Comb';
import { amperes, decibelMilliwatts, power, volts } from '../../drawings/numbers';
import type { StringNow } from '../../schemas/api/now';
import { paths } from '../../schemas/paths';
import { hearingOf, sortedStrings, type StringSort } from './tally';
import { stringsSheet } from '../../words/site';

/** What is open on a string, in tags; none: nothing is. */
function Open({ string }: { string: StringNow }) {
  const { counts, finding } = string;
  return (
    <span className="flex flex-wrap gap-1">
      {counts.notShuttingDown > 0 && <StateTag state={null} verdict="not_shutting_down" />}
      {finding?.kind === 'not_shutting_down' && (
        <Tag tone="crimson" shape="◆" title={finding.words}>
          {stringsSheet.conductorsStayLive}
        </Tag>
      )}
      {counts.stuck > 0 && (
        <Tag tone="rust" shape="▼">
          {stringsSheet.stuck(counts.stuck)}
        </Tag>
      )}
      {finding?.kind === 'stuck_positions_unknown' && (
        <Tag tone="rust" shape="▼" title={finding.words}>
          {stringsSheet.stuckPositionsUnknown}
        </Tag>
      )}
      {finding?.kind === 'unexplained_voltage' && (
        <Tag tone="plain" shape="?" title={finding.words}>
          {stringsSheet.voltageNotExplained}
        </Tag>
      )}
      {counts.unconfirmed > 0 && (
        <Tag tone="slate" shape="?">
          {stringsSheet.unconfirmed(counts.unconfirmed)}
        </Tag>
      )}
    </span>
  );
}

/** The comb once for a phone and once for a desk: the same string, as wide as there is room. */
function Combs({ string }: { string: StringNow }) {
  return (
    <>
      <div className="lg:hidden">
        <Comb id={`narrow-${string.id}`} slots={string.slots} width={170} />
      </div>
      <div className="hidden lg:block">
        <Comb id={`wide-${string.id}`} slots={string.slots} />
      </div>
    </>
  );
}

function Heard({ string }: { string: StringNow }) {
  if (string.kind === 'shutdown_only') return <span className="text-ink-2">{stringsSheet.tellsNothing}</span>;
  const { heard, units } = hearingOf(string);
  return (
    <span className={heard < units ? 'font-semibold' : ''}>{stringsSheet.heardOfUnits(heard, units)}</span>
  );
}

const columnsFor = (site: string): Column<StringNow>[] => [
  {
    key: 'name',
    label: stringsSheet.string,
    sortable: true,
    cell: (string) => (
      <a
        href={paths.string(site, string.id)}
        className="target inline-flex min-w-[44px] items-center font-semibold hover:underline"
      >
        {string.name}
      </a>
    ),
  },
  {
    key: 'need',
    label: stringsSheet.units,
    sortable: true,
    cell: (string) => (
      <div className="space-y-1">
        <Combs string={string} />
        <Open string={string} />
      </div>
    ),
  },
  {
    key: 'voltage',
    label: stringsSheet.voltage,
    numeric: true,
    sortable: true,
    cell: (string) => (
      <>
        {volts(string.voltage)}
        {hearingOf(string).heard < hearingOf(string).units && string.voltage !== null ? (
          // the others' voltage is not in the sum: it is held against nothing
          <span className="block text-xs text-ink-2">{stringsSheet.ofThoseHeard}</span>
        ) : string.expectedInShutdown !== null ? (
          <span className="block text-xs text-ink-2" title={stringsSheet.withEveryUnitIn}>
            {stringsSheet.inShutdown(string.expectedInShutdown)}
          </span>
        ) : string.expectedVoltage !== null ? (
          <span className="block text-xs text-ink-2" title={stringsSheet.expectedBy(string.expectedFrom)}>
            {stringsSheet.expectedVoltageExpected(string.expectedVoltage)}
          </span>
        ) : null}
      </>
    ),
  },
  {
    key: 'current',
    label: stringsSheet.current,
    numeric: true,
    sortable: true,
    from: 'md',
    cell: (s) => amperes(s.current),
  },
  {
    key: 'power',
    label: stringsSheet.power,
    numeric: true,
    sortable: true,
    from: 'lg',
    cell: (s) => power(s.power),
  },
  {
    key: 'heard',
    label: stringsSheet.heard,
    numeric: true,
    from: 'sm',
    cell: (string) => <Heard string={string} />,
  },
  {
    key: 'signal',
    label: stringsSheet.weakestSignal,
    numeric: true,
    sortable: true,
    from: 'md',
    cell: (string) => {
      const { weakest } = hearingOf(string);
      return weakest ? (
        <>
          {decibelMilliwatts(weakest.signal)}
          <span className="block text-xs text-ink-2">{stringsSheet.position(weakest.position)}</span>
        </>
      ) : (
        '–'
      );
    },
  },
];

/** Every string as a comb, with what its conductors carry and how it is heard. */
export const StringsSheet = memo(function StringsSheet({
  site,
  strings,
}: {
  site: string;
  strings: readonly StringNow[];
}) {
  const [sorting, setSorting] = useState<{ key: StringSort; descending: boolean }>({
    key: 'need',
    descending: false,
  });
  const [typed, setTyped] = useState('');
  // the letter shows at once, the rows follow
  const wanted = useDeferredValue(typed);
  const columns = useMemo(() => columnsFor(site), [site]);
  const shown = useMemo(() => {
    const q = wanted.trim().toLowerCase();
    const some = strings.filter(
      (s) =>
        q === '' ||
        s.name.toLowerCase().startsWith(q) ||
        s.slots.some((slot) => slot.serial?.toLowerCase().startsWith(q)),
    );
    return sortedStrings(some, sorting.key, sorting.descending);
  }, [strings, wanted, sorting]);
  return (
    <Sheet
      id="strings"
      flush
      title={stringsSheet.strings}
      aside={
        <>
          {stringsSheet.countedShownString(shown.length)}
          {shown.length < strings.length && stringsSheet.ofStrings(strings.length)}
        </>
      }
    >
      {strings.length > 8 && (
        <SearchInput
          label={stringsSheet.filterStringsByName}
          placeholder={stringsSheet.filterByNameOr}
          value={typed}
          onChange={setTyped}
          className="no-print mb-2 sm:w-[220px]"
        />
      )}
      <LongTable
        what={stringsSheet.what}
        caption={stringsSheet.stringsWithTheirUnits}
        columns={columns}
        rows={shown}
        rowKey={(string) => string.id}
        sorting={sorting}
        onSort={({ key, descending }) =>
          setSorting({
            key: key as StringSort,
            // figures from the largest first, names and needs from the first
            descending:
              key === sorting.key ? descending : key !== 'name' && key !== 'need' && key !== 'signal',
          })
        }
        empty={
          strings.length === 0 ? (
            <Notice kind="empty" title={stringsSheet.noStringIsEntered} />
          ) : (
            <Notice kind="empty" title={stringsSheet.noStringMatches}>
              {stringsSheet.anotherNameOrSerial}
            </Notice>
          )
        }
      />
    </Sheet>
  );
});
