import { useMutation, useQuery } from '@tanstack/react-query';
import { TimeChart } from '../../components/charts/TimeChart';
import type { SlotRef } from '../../components/placements/evidence';
import { Button } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { NotRead } from '../../components/ui/NotRead';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime, useNow } from '../../components/ui/Time';
import { api } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import type { StringNow } from '../../schemas/api/now';
import type { IsolationPage, IsolationRun } from '../../schemas/api/isolation';
import { paths } from '../../schemas/paths';
import { IsolationForm } from './IsolationStart';
import { IsolationResult } from './IsolationResult';
import { isolationModel } from './chart';
import { isolationKey, isolationQuery } from './query';
import { isolationWords, unbroken } from './words';
import { isolationSheet } from '../../words/membership';

interface Props {
  siteId: string;
  timeZone: string;
  data: IsolationPage;
  strings: readonly StringNow[];
  mayRun: boolean;
  string: string;
  onString: (id: string) => void;
  onReview: ((first: SlotRef, second: SlotRef | null) => void) | null;
}

function Said({ run }: { run: IsolationRun }) {
  const words = isolationWords(run);
  return (
    <div role="status">
      <h3 className="text-[19px] leading-6 tracking-[-0.02em]">{unbroken(words.heading)}</h3>
      <p className="mt-1 text-ink-2">
        {words.strong && <strong className="font-semibold text-ink">{words.strong}</strong>} {words.rest}
      </p>
    </div>
  );
}

function Who({ run, at, timeZone }: { run: IsolationRun; at: string; timeZone: string }) {
  return (
    <p className="text-sm text-ink-2">
      <SiteTime at={run.startedAt} now={at} timeZone={timeZone} zone />
      {isolationSheet.byOnSite(run.startedBy, run.personOnSite)}
      {run.stoppedAt && (
        <>
          {isolationSheet.ended}
          <SiteTime at={run.stoppedAt} now={at} timeZone={timeZone} />
          {run.stoppedBy ? isolationSheet.byStoppedBy(run.stoppedBy) : isolationSheet.itsTimeWasUp}
        </>
      )}
    </p>
  );
}

/** The decisive way: a person isolates one string, and the page watches whose current goes to zero. */
export function IsolationSheet(props: Props) {
  const { siteId, timeZone, data, strings, mayRun, string, onString, onReview } = props;
  const client = queryClient();
  const key = isolationKey(siteId);
  const { error } = useQuery(isolationQuery(siteId), client);
  const take = (page: IsolationPage) => client.setQueryData(key, page);
  const stop = useMutation(
    {
      mutationFn: () => api<IsolationPage>(paths.api.isolationStop(siteId), { method: 'POST', body: {} }),
      onSuccess: take,
      onError: () => void client.invalidateQueries({ queryKey: key }),
    },
    client,
  );
  const now = useNow(data.at, 1000);
  const { open, runs } = data;
  const last = open ?? runs[0];
  const left = open ? (new Date(open.endsAt).getTime() - now.getTime()) / 1000 : 0;
  return (
    <>
      <Sheet
        id="isolation"
        title={
          open ? isolationSheet.watchingStringName(open.stringName) : isolationSheet.theDecisiveWayIsolate
        }
        flush
        aside={open ? isolationSheet.endsByItselfIn(left) : undefined}
      >
        <div className="mb-4">
          <Caution strong={isolationSheet.byTheStringsLoad}>{isolationSheet.anArcKillsAnd}</Caution>
        </div>
        <NotRead error={error} title={isolationSheet.theWatchCouldNot} className="mb-4" />
        {open ? (
          <div className="grid gap-4">
            <Said run={open} />
            <Who run={open} at={data.at} timeZone={timeZone} />
            {data.currents && (
              <TimeChart
                model={isolationModel(open, data.currents, timeZone)}
                height={260}
                fileName={`isolation-${open.stringName}`}
              />
            )}
            <IsolationResult run={open} timeZone={timeZone} strings={strings} onReview={null} />
            {stop.error && (
              <Notice kind="failed" title={isolationSheet.itCouldNotBe}>
                {stop.error.message}
              </Notice>
            )}
            {mayRun && (
              <div>
                <Button weight="primary" onClick={() => stop.mutate()} disabled={stop.isPending}>
                  {stop.isPending ? isolationSheet.stopping : isolationSheet.stopWatchingAndKeep}
                </Button>
                <p className="mt-1.5 text-sm text-ink-2">
                  {isolationSheet.twoReportsInRow(data.reportIntervalS)}
                </p>
              </div>
            )}
          </div>
        ) : mayRun ? (
          <div className="max-w-[520px]">
            <p className="mb-3 text-ink-2">{isolationSheet.aPersonIsolatesOne}</p>
            <IsolationForm
              siteId={siteId}
              strings={strings}
              string={string}
              onString={onString}
              onStarted={take}
            />
          </div>
        ) : (
          <p>{isolationSheet.aManagerOrA}</p>
        )}
      </Sheet>
      {runs.length > 0 && (
        <Sheet
          id="isolations"
          title={isolationSheet.whatWasFoundBefore}
          flush
          aside={isolationSheet.runsKept(runs.length)}
        >
          <ol className="grid gap-5">
            {runs.map((run) => (
              <li key={run.id} className="border-b border-rule-faint pb-4 last:border-b-0 last:pb-0">
                <Said run={run} />
                <Who run={run} at={data.at} timeZone={timeZone} />
                <details className="mt-2" open={run.id === last?.id && run.finding.outcome === 'told'}>
                  <summary className="target inline-flex cursor-pointer items-center text-sm text-petrol">
                    {isolationSheet.theEvidence}
                  </summary>
                  <div className="mt-2 grid gap-4">
                    {run.id === last?.id && data.currents && (
                      <TimeChart
                        model={isolationModel(run, data.currents, timeZone)}
                        height={240}
                        fileName={`isolation-${run.stringName}`}
                      />
                    )}
                    <IsolationResult run={run} timeZone={timeZone} strings={strings} onReview={onReview} />
                  </div>
                </details>
              </li>
            ))}
          </ol>
        </Sheet>
      )}
    </>
  );
}
