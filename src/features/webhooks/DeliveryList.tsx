import { Button } from '../../components/ui/Button';
import { Fold } from '../../components/ui/Fold';
import { Tag } from '../../components/ui/Tag';
import { SiteTime } from '../../components/ui/Time';
import { KINDS } from '../../domain/notices/kinds';
import type { DeliveryItem } from '../../schemas/api/webhooks';
import { stateWords } from '../../words/webhooks-sentences';
import { deliveryList } from '../../words/webhooks';

interface Props {
  deliveries: readonly DeliveryItem[];
  at: string;
  timeZone: string;
  busy: boolean;
  onResend: (delivery: DeliveryItem) => void;
}
const TONE = { delivered: 'petrol', given_up: 'rust', waits: 'outline' } as const;

/** Calls, the newest first, each with every try and what came back. */
export function DeliveryList({ deliveries, at, timeZone, busy, onResend }: Props) {
  return (
    <ol className="divide-y divide-rule-faint">
      {deliveries.map((d) => {
        const last = d.attempts[0];
        const kind = d.kind === 'test' ? deliveryList.test : KINDS[d.kind].name;
        return (
          <li key={d.id} className="py-3" data-state={d.state}>
            <div className="flex flex-wrap items-start justify-between gap-x-4 gap-y-2">
              <div className="min-w-0">
                <p className="font-medium">
                  {kind}
                  {d.site && <span className="font-normal text-ink-2"> · {d.site}</span>}
                </p>
                <p className="text-sm text-ink-2">
                  <SiteTime at={d.createdAt} now={at} timeZone={timeZone} zone />
                  {last && <>{deliveryList.statusNullNoAnswer(last.status, last.latencyMs)}</>}
                  {d.nextAt && last && (
                    <>
                      {deliveryList.nextTry}
                      <SiteTime at={d.nextAt} now={at} timeZone={timeZone} />
                    </>
                  )}
                </p>
                {last?.error && <p className="mt-0.5 break-words text-sm text-rust-ink">{last.error}</p>}
              </div>
              <span className="flex items-center gap-3">
                <Tag tone={TONE[d.state]}>{stateWords(d)}</Tag>
                <Button
                  disabled={busy}
                  onClick={() => onResend(d)}
                  aria-label={deliveryList.sendAgain2(kind, d.id)}
                >
                  {deliveryList.sendAgain}
                </Button>
              </span>
            </div>
            <Fold title={deliveryList.whatWasSentAnd} opens={deliveryList.showIt} className="mt-2">
              <pre
                tabIndex={0}
                aria-label={deliveryList.whatWasSent}
                className="overflow-x-auto whitespace-pre-wrap break-all border border-rule-faint p-3 text-sm"
              >
                {d.body}
              </pre>
              <ol className="mt-2 grid gap-1 text-sm">
                {d.attempts.map((a) => (
                  <li key={a.at}>
                    <SiteTime at={a.at} now={at} timeZone={timeZone} />
                    {deliveryList.statusAndLatency(a.status, a.latencyMs)}
                    {a.excerpt && (
                      <code className="block whitespace-pre-wrap break-all text-ink-2">{a.excerpt}</code>
                    )}
                  </li>
                ))}
              </ol>
            </Fold>
          </li>
        );
      })}
    </ol>
  );
}
