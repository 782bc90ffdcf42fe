import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { ApiError, api } from '../../lib/api';
import type { CaseReport, ReportedCase } from '../../schemas/api/cases';
import { paths } from '../../schemas/paths';
import { reportSheet } from '../../words/customer';

interface Props {
  siteId: string;
  timeZone: string;
  organisation: string;
  initial: readonly ReportedCase[];
}

const STANDS: Record<ReportedCase['state'], string> = {
  open: reportSheet.beingLookedAt,
  waiting: reportSheet.beingLookedAtWaiting,
  done: reportSheet.done,
  no_fault_found: reportSheet.lookedAtNoFault,
};

/** "Something looks wrong": the owner's own words go to whoever looks after the roof, with the figures of that minute. */
export function ReportSheet({ siteId, timeZone, organisation, initial }: Props) {
  const [reports, setReports] = useState(initial);
  const [what, setWhat] = useState('');
  const [ref, setRef] = useState(() => newRef());
  const [busy, setBusy] = useState(false);
  const [fault, setFault] = useState<string | null>(null);
  const [sent, setSent] = useState(false);
  const send = async (): Promise<void> => {
    setBusy(true);
    setFault(null);
    setSent(false);
    try {
      const body: CaseReport = { ref, what };
      const made = await api<ReportedCase>(paths.api.customerReports(siteId), { method: 'POST', body });
      setReports([made, ...reports.filter((r) => r.id !== made.id)]);
      setWhat('');
      setRef(newRef());
      setSent(true);
    } catch (error) {
      setFault(error instanceof ApiError ? (error.fault('what') ?? error.message) : reportSheet.notSent);
    }
    setBusy(false);
  };
  return (
    <Sheet id="report" title={reportSheet.somethingLooksWrong} className="no-print">
      <p>{reportSheet.sayWhatYouSee(organisation)}</p>
      <form
        className="mt-3"
        onSubmit={(event) => {
          event.preventDefault();
          void send();
        }}
      >
        <label htmlFor="report-what" className="mb-1 block font-medium">
          {reportSheet.whatLooksWrong}
        </label>
        <textarea
          id="report-what"
          rows={4}
          maxLength={8000}
          value={what}
          onChange={(event) => setWhat(event.target.value)}
          aria-describedby={fault ? 'report-fault' : undefined}
          aria-invalid={fault ? true : undefined}
          className={`w-full rounded border bg-sheet px-3 py-2 text-[16px] ${fault ? 'border-rust' : 'border-rule'}`}
        />
        {fault && (
          <p id="report-fault" role="alert" className="mt-1 text-sm font-medium text-rust-ink">
            {fault}
          </p>
        )}
        <Button type="submit" weight="primary" disabled={busy || what.trim() === ''} className="mt-2">
          {busy ? reportSheet.sending : reportSheet.sendTo(organisation)}
        </Button>
      </form>
      {sent && (
        <div className="mt-3">
          <Notice kind="done" title={reportSheet.sent(organisation)}>
            {reportSheet.shownBelow}
          </Notice>
        </div>
      )}
      {reports.length > 0 && (
        <ul
          className="mt-4 divide-y divide-rule-faint border-t border-rule-faint"
          aria-label={reportSheet.whatYouReported}
        >
          {reports.map((r) => (
            <li key={r.id} className="py-3">
              <p className="whitespace-pre-line break-words">{r.what}</p>
              <p className="mt-1 text-sm text-ink-2">
                {reportSheet.reportLine(r.at, timeZone, r.number, STANDS[r.state], r.closedAt)}
              </p>
            </li>
          ))}
        </ul>
      )}
    </Sheet>
  );
}

/** Sent twice is stored once. */
const newRef = (): string => globalThis.crypto.randomUUID();
