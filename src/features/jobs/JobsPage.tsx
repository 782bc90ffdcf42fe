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
import { doneWords, isLate, jobsFinding, took } from './words';

function Last({ kind, page, timeZone }: { kind: JobKindLine; page: Page; timeZone: string }) {
  const { last } = kind;
  if (!last) return <span className="text-ink-2">not yet</span>;
  return (
    <>
      <SiteTime at={last.startedAt} now={page.at} timeZone={timeZone} />
      <span className="block text-sm text-ink-2">
        {last.endedAt === null
          ? 'not ended: it runs, or its process died'
          : (last.failed ?? (doneWords(last.done) || 'nothing to do'))}
      </span>
    </>
  );
}

function State({ kind, at }: { kind: JobKindLine; at: string }) {
  if (kind.failing > 0)
    return (
      <Tag tone="rust" shape="✕">
        failing
      </Tag>
    );
  if (isLate(kind, at))
    return (
      <Tag tone="rust" shape="!">
        late
      </Tag>
    );
  if (kind.running > 0)
    return (
      <Tag tone="petrol" shape="◐">
        runs
      </Tag>
    );
  return <Tag shape="✓">in order</Tag>;
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
      setSaid(`"${title}" is tried again now.`);
    } catch (error) {
      setFault(
        error instanceof ApiError ? error : new ApiError(0, 'Not sent', 'It did not work. Try again.'),
      );
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
        <Sheet id="failing" title="To be tried again" className="mb-5">
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
                    tried {job.attempts} of {job.attemptsMax} times
                    {job.nextAt === null ? '; given up' : ', next at '}
                    {job.nextAt !== null && <SiteTime at={job.nextAt} now={page.at} timeZone={timeZone} />}
                  </p>
                </div>
                <Button disabled={busy !== null} onClick={() => void retry(job.id, job.title)}>
                  {busy === job.id ? 'Trying …' : 'Try again now'}
                </Button>
              </li>
            ))}
          </ul>
        </Sheet>
      )}
      <Sheet id="kinds" title="Kinds of job" flush>
        <Table
          caption="Kinds of background job, how each last went and when it runs next"
          rows={page.kinds}
          rowKey={(k) => k.task}
          columns={[
            { key: 'title', label: 'Job', cell: (k) => <span className="font-medium">{k.title}</span> },
            { key: 'state', label: 'State', cell: (k) => <State kind={k} at={page.at} /> },
            {
              key: 'last',
              label: 'Last run',
              cell: (k) => <Last kind={k} page={page} timeZone={timeZone} />,
            },
            { key: 'took', label: 'Took', numeric: true, from: 'sm', cell: (k) => took(k.last?.ms ?? null) },
            { key: 'usual', label: 'Usually', numeric: true, from: 'lg', cell: (k) => took(k.usualMs) },
            {
              key: 'next',
              label: 'Next',
              from: 'sm',
              cell: (k) =>
                k.next === null ? (
                  <span className="text-ink-2">when asked</span>
                ) : (
                  <SiteTime at={k.next} now={page.at} timeZone={timeZone} />
                ),
            },
            { key: 'waiting', label: 'Waiting', numeric: true, from: 'md', cell: (k) => number(k.waiting) },
            { key: 'runs', label: 'Runs, 24 h', numeric: true, from: 'lg', cell: (k) => number(k.runs24h) },
            {
              key: 'failed',
              label: 'Failed, 24 h',
              numeric: true,
              from: 'md',
              cell: (k) => number(k.failed24h),
            },
          ]}
        />
      </Sheet>
      {page.failures.length > 0 && (
        <Sheet id="failures" title="Failures of the last days" className="mt-5">
          <ul className="divide-y divide-rule-faint">
            {page.failures.map((f) => (
              <li key={`${f.task} ${f.siteName ?? ''} ${f.startedAt}`} className="py-2">
                <p className="text-sm text-ink-2">
                  <SiteTime at={f.startedAt} now={page.at} timeZone={timeZone} /> · {f.title}
                  {f.siteName && `, ${f.siteName}`}
                  {f.times > 1 && ` · ${f.times} times, the newest`}
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
