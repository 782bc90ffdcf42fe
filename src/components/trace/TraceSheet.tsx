import { memo } from 'react';
import { useQuery } from '@tanstack/react-query';
import { Sheet } from '../ui/Sheet';
import { Table, type Column } from '../ui/Table';
import { TraceLines } from '../../drawings/TraceLines';
import { UNKNOWN, volts } from '../../drawings/numbers';
import { clockOrDate, clockSeconds, fullTime } from '../../drawings/times';
import { commandWords } from '../../domain/verdicts/command-words';
import { api } from '../../lib/api';
import { useLive } from '../../lib/live-hook';
import { tells } from '../../lib/patch';
import { queryClient } from '../../lib/query-client';
import { paths } from '../../schemas/paths';
import type { SiteTraces } from '../../schemas/api/trace';
import { POINT_WORDS, bestTraces, factsOf, traceWords, type TraceFacts } from './model';
import { traceSheet } from '../../words/trace';

interface Props {
  siteId: string;
  /** Only this string's traces; absent: the whole site's. */
  stringId?: string;
  timeZone: string;
}

/** A trace grows for two minutes after a command; a while longer for what comes late. */
const GROWS_MS = 150_000;
const EVERY_MS = 2000;

const columns = (limit: SiteTraces['limit']): Column<TraceFacts>[] => [
  {
    key: 'string',
    label: traceSheet.string,
    cell: (f) => <span className="font-semibold">{f.trace.stringName}</span>,
  },
  { key: 'first', label: traceSheet.atTheCommand, numeric: true, cell: (f) => volts(f.first) },
  { key: 'last', label: traceSheet.newest, numeric: true, cell: (f) => volts(f.last) },
  {
    key: 'under',
    label: traceSheet.orLess(limit.voltage),
    numeric: true,
    cell: (f) =>
      f.underFromS === null
        ? UNKNOWN
        : f.underFromS === 0
          ? traceSheet.fromTheStart
          : traceSheet.afterUnderFromSs(f.underFromS),
  },
  {
    key: 'point',
    label: traceSheet.measured,
    from: 'md',
    className: 'text-ink-2',
    cell: (f) => `${POINT_WORDS[f.trace.measuringPoint]}, ±${volts(f.trace.accuracy)}`,
  },
];

/** Second by second after the newest command: lines, a sentence, and the same as a table. */
export const TraceSheet = memo(function TraceSheet({ siteId, stringId, timeZone }: Props) {
  const client = queryClient();
  const key = ['traces', siteId, stringId ?? 'all'];
  const { data, error } = useQuery(
    {
      queryKey: key,
      queryFn: ({ signal }) =>
        api<SiteTraces>(paths.api.siteTraces(siteId), { query: { string: stringId }, signal }),
      refetchInterval: (query) => {
        const read = query.state.data;
        const since = read?.command?.since ?? read?.startedAt;
        return read && since && Date.parse(read.at) - Date.parse(since) < GROWS_MS ? EVERY_MS : false;
      },
    },
    client,
  );
  useLive(stringId ? `string:${stringId}` : `site:${siteId}`, (change, kind) => {
    // commands of the time before it listened, or could not
    if (kind === 'snapshot') void client.invalidateQueries({ queryKey: key });
    else if (tells(change, (e) => e.kind === 'command'))
      // the first seconds of a trace follow the command
      for (const afterMs of [0, 2500, 5000, 10_000])
        setTimeout(() => void client.invalidateQueries({ queryKey: key }), afterMs);
  });
  if (!data?.startedAt || data.traces.length === 0) return null;
  const { command, limit, startedAt } = data;
  const facts = bestTraces(data.traces).map((t) => factsOf(t, limit.voltage));
  const words = traceWords(data);
  const drawn = {
    lines: facts.map((f) => ({
      name: f.trace.stringName,
      voltage: f.trace.voltage,
      tone: (f.last ?? 0) > limit.voltage ? ('passing' as const) : ('shutdown' as const),
    })),
    limit,
    label: traceSheet.voltageInTheSeconds(startedAt, timeZone, words),
  };
  return (
    <Sheet
      id="trace"
      title={traceSheet.secondBySecond}
      flush
      aside={
        <time dateTime={startedAt} title={fullTime(startedAt, timeZone)}>
          {command ? `${command.where}: ${commandWords(command.inForce)}, ` : ''}
          {clockOrDate(startedAt, data.at, timeZone).replace(/\d\d:\d\d$/, '')}
          {clockSeconds(startedAt, timeZone)}
        </time>
      }
    >
      <p className="mb-3">{words}</p>
      <div className="hidden sm:block">
        <TraceLines {...drawn} width={stringId ? 820 : 1280} height={260} />
      </div>
      <div className="sm:hidden">
        <TraceLines {...drawn} width={360} height={220} />
      </div>
      <details className="mt-2">
        <summary className="inline-flex min-h-[36px] cursor-pointer items-center text-sm underline underline-offset-2">
          {traceSheet.theSameAsA}
        </summary>
        <Table
          caption={traceSheet.voltagesAfterTheCommand(startedAt, timeZone)}
          columns={columns(limit)}
          rows={facts}
          rowKey={(f) => f.trace.stringId}
        />
      </details>
      <p className="mt-2 text-sm text-ink-2">
        {traceSheet.reportsOfUnitsAnd(limit.source)}
        {error && traceSheet.theNewestSecondsCould}
      </p>
    </Sheet>
  );
});
