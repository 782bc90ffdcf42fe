import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Table } from '../../components/ui/Table';
import { Tag } from '../../components/ui/Tag';
import { SiteTime } from '../../components/ui/Time';
import { number } from '../../drawings/numbers';
import { api, ApiError } from '../../lib/api';
import type { JobKindLine, JobsPage as Page, RetryBody } from '../../schemas/api/jobs';
import { paths } from '../../schemas/paths';
import { doneWords, isLate, jobsFinding, took } from '../../words/jobs-sentences';
import { jobsPage } from '../../words/jobs';

function Last({ kind, page, timeZone }: { kind: JobKindLine; page: Page; timeZone: string }) {
  const { last } = kind;
  if (!last) return <span className="text-ink-2">{jobsPage.notYet}</span>;
  return (
    <>
      <SiteTime at={last.startedAt} now={page.at} timeZone={timeZone} />
      <span className="block text-sm text-ink-2">
        {last.endedAt === null
          ? jobsPage.notEndedItRuns
          : (last.failed ?? (doneWords(last.done) || jobsPage.nothingToDo))}
      </span>
    </>
  );
}

function State({ kind, at }: { kind: JobKindLine; at: string }) {
  if (kind.failing > 0)
    return (
      <Tag tone="rust" shape="✕">
        {jobsPage.failing}
      </Tag>
    );
  if (isLate(kind, at))
    return (
      <Tag tone="rust" shape="!">
        {jobsPage.late}
      </Tag>
    );
  if (kind.running > 0)
    return (
      <Tag tone="petrol" shape="◐">
        {jobsPage.runs}
      </Tag>
    );
  return <Tag shape="✓">{jobsPage.inOrder}</Tag>;
}

/** How background jobs go, and the button that tries a failed one again. */
export function JobsPage({ initial, timeZone }: { initial: Page; timeZone: string }) {
  const [page, setPage] = useState(initial);
  const [busy, setBusy] = useState<string | null>(null);
  const [said, setSaid] = useState('');
  const [fault, setFault] = useState<ApiError | null>(null);
  const { finding, sentence } = jobsFinding(page);
  const retry = async (job: string, title: string): Promise<void> => {
    setBusy(job);
    setFault(null);
    try {
      const body: RetryBody = { job };
      setPage(await api<Page>(paths.api.jobsRetry(), { method: 'POST', body }));
      setSaid(jobsPage.isTriedAgainNow(title));
    } catch (error) {
      setFault(error instanceof ApiError ? error : new ApiError(0, jobsPage.notSent, jobsPage.itDidNotWork));
    }
    setBusy(null);
  };
  return (
    <>
      <Heading finding={finding} sentence={sentence} />
      {fault && (
        <div className="mb-4">
          <Notice kind="failed" title={fault.title}>
            {fault.message}
          </Notice>
        </div>
      )}
      <p role="status" className="mb-3 text-petrol empty:hidden">
        {said}
      </p>
      {page.failing.length > 0 && (
        <Sheet id="failing" title={jobsPage.toBeTriedAgain} className="mb-5">
          <ul className="divide-y divide-rule-faint">
            {page.failing.map((job) => (
              <li key={job.id} className="flex flex-wrap items-center justify-between gap-x-6 gap-y-2 py-3">
                <div className="min-w-0">
                  <p className="font-medium">
                    {job.title}
                    {job.siteName && `, ${job.siteName}`}
                  </p>
                  <p className="break-words text-sm text-rust-ink">{job.error}</p>
                  <p className="text-sm text-ink-2">
                    {jobsPage.triedOfTimes(job.attempts, job.attemptsMax, job.nextAt)}
                    {job.nextAt !== null && <SiteTime at={job.nextAt} now={page.at} timeZone={timeZone} />}
                  </p>
                </div>
                <Button disabled={busy !== null} onClick={() => void retry(job.id, job.title)}>
                  {busy === job.id ? jobsPage.trying : jobsPage.tryAgainNow}
                </Button>
              </li>
            ))}
          </ul>
        </Sheet>
      )}
      <Sheet id="kinds" title={jobsPage.kindsOfJob} flush>
        <Table
          caption={jobsPage.kindsOfBackgroundJob}
          rows={page.kinds}
          rowKey={(k) => k.task}
          columns={[
            {
              key: 'title',
              label: jobsPage.job,
              cell: (k) => <span className="font-medium">{k.title}</span>,
            },
            { key: 'state', label: jobsPage.state, cell: (k) => <State kind={k} at={page.at} /> },
            {
              key: 'last',
              label: jobsPage.lastRun,
              cell: (k) => <Last kind={k} page={page} timeZone={timeZone} />,
            },
            {
              key: 'took',
              label: jobsPage.took,
              numeric: true,
              from: 'sm',
              cell: (k) => took(k.last?.ms ?? null),
            },
            {
              key: 'usual',
              label: jobsPage.usually,
              numeric: true,
              from: 'lg',
              cell: (k) => took(k.usualMs),
            },
            {
              key: 'next',
              label: jobsPage.next,
              from: 'sm',
              cell: (k) =>
                k.next === null ? (
                  <span className="text-ink-2">{jobsPage.whenAsked}</span>
                ) : (
                  <SiteTime at={k.next} now={page.at} timeZone={timeZone} />
                ),
            },
            {
              key: 'waiting',
              label: jobsPage.waiting,
              numeric: true,
              from: 'md',
              cell: (k) => number(k.waiting),
            },
            {
              key: 'runs',
              label: jobsPage.runs24H,
              numeric: true,
              from: 'lg',
              cell: (k) => number(k.runs24h),
            },
            {
              key: 'failed',
              label: jobsPage.failed24H,
              numeric: true,
              from: 'md',
              cell: (k) => number(k.failed24h),
            },
          ]}
        />
      </Sheet>
      {page.failures.length > 0 && (
        <Sheet id="failures" title={jobsPage.failuresOfTheLast} className="mt-5">
          <ul className="divide-y divide-rule-faint">
            {page.failures.map((f) => (
              <li key={`${f.task} ${f.siteName ?? ''} ${f.startedAt}`} className="py-2">
                <p className="text-sm text-ink-2">
                  <SiteTime at={f.startedAt} now={page.at} timeZone={timeZone} /> · {f.title}
                  {f.siteName && `, ${f.siteName}`}
                  {f.times > 1 && jobsPage.timesTheNewest(f.times)}
                </p>
                <p className="break-words">{f.failed}</p>
              </li>
            ))}
          </ul>
        </Sheet>
      )}
    </>
  );
}
