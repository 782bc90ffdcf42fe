import { useMutation } from '@tanstack/react-query';
import { useEffect, useRef } from 'react';
import { fullTime } from '../../drawings/times';
import { api, ApiError } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import type { Acknowledgement, AcknowledgeReply, SiteContact } from '../../schemas/api/fleet';
import type { CauseNow } from '../../schemas/api/now';
import { paths } from '../../schemas/paths';
import { Button } from '../ui/Button';
import { siteClock, useReaderZone } from '../ui/reader-zone';
import { sharedCausesAcknowledge } from '../../words/shared-causes';

interface Props {
  cause: Pick<CauseNow, 'key' | 'siteId' | 'siteName'>;
  contact: SiteContact | undefined;
  /** Who has it; undefined: nobody yet. */
  taken: Acknowledgement | undefined;
  now: string;
  timeZone: string;
  onTaken: (reply: AcknowledgeReply) => void;
}

const dialled = (phone: string): string => `tel:${phone.replace(/[^\d+]/g, '')}`;

/** Who has a hazard, and the one button: it puts a name to it and brings up the site's telephone number. */
export function Acknowledge({ cause, contact, taken, now, timeZone, onTaken }: Props) {
  const call = useRef<HTMLAnchorElement>(null);
  const asked = useRef(false);
  const readerZone = useReaderZone();
  const mutation = useMutation(
    {
      mutationFn: () =>
        api<AcknowledgeReply>(paths.api.acknowledge(cause.siteId), {
          method: 'POST',
          body: { key: cause.key },
        }),
      onSuccess: onTaken,
    },
    queryClient(),
  );
  useEffect(() => {
    if (taken && asked.current) call.current?.focus();
  }, [taken]);

  if (!taken)
    return (
      <div className="mt-3">
        <Button
          weight="primary"
          disabled={mutation.isPending}
          onClick={() => {
            asked.current = true;
            mutation.mutate();
          }}
        >
          {mutation.isPending
            ? sharedCausesAcknowledge.puttingYourNameTo
            : sharedCausesAcknowledge.acknowledgeAndCallThe}
        </Button>
        <p role="alert" className="mt-2 text-sm text-rust-ink empty:hidden">
          {mutation.error instanceof ApiError ? mutation.error.message : ''}
        </p>
      </div>
    );
  return (
    <div className="mt-3 border-t border-rule-faint pt-3" role="status">
      <p className="text-sm text-ink-2">
        <strong className="font-semibold text-ink">{taken.person}</strong>
        {sharedCausesAcknowledge.hasItSince}
        <time dateTime={taken.at} title={fullTime(taken.at, timeZone)}>
          {siteClock(taken.at, now, timeZone, readerZone)}
        </time>
        .
      </p>
      {contact?.phone ? (
        <p className="mt-1 flex flex-wrap items-baseline gap-x-2">
          <a
            ref={call}
            href={dialled(contact.phone)}
            className="target link inline-flex items-center text-[17px] font-semibold"
          >
            {sharedCausesAcknowledge.callPhone(contact.phone)}
          </a>
          <span className="text-sm text-ink-2">{contact.name || cause.siteName}</span>
        </p>
      ) : (
        <p className="mt-1 text-sm">{sharedCausesAcknowledge.noTelephoneNumberIs(cause.siteName)}</p>
      )}
      {contact?.shutdownSwitchPlace && (
        <p className="text-sm text-ink-2">
          {sharedCausesAcknowledge.itsShutdownSwitch(contact.shutdownSwitchPlace)}
        </p>
      )}
    </div>
  );
}
