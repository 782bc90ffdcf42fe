import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Tag } from '../../components/ui/Tag';
import { api, ApiError } from '../../lib/api';
import { paths } from '../../schemas/paths';
import type { StepNow } from '../../schemas/api/commissioning';
import { commissioningGaps } from '../../words/commissioning';

interface Props {
  site: string;
  gaps: StepNow['gaps'];
  mayAccept: boolean;
  onAccepted: () => void;
}

/** The points that keep a step from being done; a manager can let one stand open, by name and with a reason. */
export function Gaps({ site, gaps, mayAccept, onAccepted }: Props) {
  const [asked, setAsked] = useState<string | null>(null);
  return (
    <ul className="divide-y divide-rule-faint">
      {gaps.map((gap) => (
        <li key={gap.key} className="py-2">
          <div className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1">
            <span className="min-w-0">{gap.words}</span>
            {gap.accepted ? (
              <Tag tone="outline">{commissioningGaps.acceptedAsItIs}</Tag>
            ) : (
              mayAccept &&
              asked !== gap.key && (
                <Button onClick={() => setAsked(gap.key)}>{commissioningGaps.acceptAsItIs}</Button>
              )
            )}
          </div>
          {asked === gap.key && (
            <Reason
              site={site}
              gap={gap.key}
              onDone={() => {
                setAsked(null);
                onAccepted();
              }}
              onCancel={() => setAsked(null)}
            />
          )}
        </li>
      ))}
    </ul>
  );
}

function Reason({
  site,
  gap,
  onDone,
  onCancel,
}: {
  site: string;
  gap: string;
  onDone: () => void;
  onCancel: () => void;
}) {
  const [reason, setReason] = useState('');
  const [fault, setFault] = useState<string | null>(null);
  const [busy, setBusy] = useState(false);
  const send = async () => {
    setBusy(true);
    setFault(null);
    try {
      await api(paths.api.acceptGap(site), { method: 'POST', body: { gap, reason } });
      onDone();
    } catch (error) {
      if (!(error instanceof ApiError)) throw error;
      setFault(error.fault('reason') ?? error.message);
      setBusy(false);
    }
  };
  return (
    <form
      className="mt-2"
      onSubmit={(event) => {
        event.preventDefault();
        void send();
      }}
    >
      <label htmlFor={`reason-${gap}`} className="mb-1 block font-medium">
        {commissioningGaps.whyThisMayStand}
      </label>
      <textarea
        id={`reason-${gap}`}
        value={reason}
        rows={3}
        autoFocus
        onChange={(event) => setReason(event.target.value)}
        aria-invalid={fault ? true : undefined}
        aria-describedby={`reason-${gap}-said`}
        className={`w-full rounded border bg-sheet px-3 py-2 text-[16px] ${fault ? 'border-rust' : 'border-rule'}`}
      />
      <p
        id={`reason-${gap}-said`}
        role={fault ? 'alert' : undefined}
        className={`mt-1 text-sm ${fault ? 'font-medium text-rust-ink' : 'text-ink-2'}`}
      >
        {fault ?? commissioningGaps.yourNameTheTime}
      </p>
      <div className="mt-2 flex gap-2">
        <Button type="submit" weight="primary" disabled={busy}>
          {commissioningGaps.acceptInMyName}
        </Button>
        <Button onClick={onCancel}>{commissioningGaps.leaveItOpen}</Button>
      </div>
    </form>
  );
}
