import { useState } from 'react';
import { Acknowledge } from '../../components/causes/Acknowledge';
import { Caution } from '../../components/ui/Caution';
import { Sheet } from '../../components/ui/Sheet';
import type { CausePage } from '../../schemas/api/causes';
import { causeCard } from '../../words/causes';

/** What to treat as live and whom to call: before everything else on the card. */
export function HazardSheet({ cause }: { cause: CausePage }) {
  const [taken, setTaken] = useState(cause.acknowledged);
  return (
    <section aria-label={causeCard.whatToTreatAs} className="mb-5">
      <Caution strong={causeCard.treatEveryStringOf}>{causeCard.isolateLockOutProve}</Caution>
      <Sheet className="mt-3" title={causeCard.callContact(cause.contact?.name, cause.siteName)}>
        <p className="text-[15px] text-ink-2">{causeCard.whoIsOnSite}</p>
        {cause.contact?.phone && !taken && (
          <p className="mt-2">
            <a
              href={`tel:${cause.contact.phone.replace(/[^\d+]/g, '')}`}
              className="target link inline-flex items-center text-[17px] font-semibold"
            >
              {cause.contact.phone}
            </a>
          </p>
        )}
        <Acknowledge
          cause={cause}
          contact={cause.contact ?? undefined}
          taken={taken ? { key: cause.key, siteId: cause.siteId, ...taken } : undefined}
          now={cause.at}
          timeZone={cause.timeZone}
          onTaken={({ acknowledgement }) => setTaken(acknowledgement)}
        />
      </Sheet>
    </section>
  );
}
