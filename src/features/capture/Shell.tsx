import { useEffect, useState } from 'react';
import { ButtonLink } from '../../components/ui/Button';
import { Notice } from '../../components/ui/Notice';
import { clockOrDate } from '../../drawings/times';
import type { CapturePhone, PhoneState } from '../../lib/capture-phone';
import type { CaptureSnapshot } from '../../schemas/api/capture';
import { paths } from '../../schemas/paths';
import { shell } from '../../words/capture';

/** The site that is asked for is not on this phone. */
export function NotHere({ state }: { state: PhoneState }) {
  if (!state.ready) return <p role="status">{shell.readingWhatThisPhone}</p>;
  return (
    <>
      <h1 className="text-[28px] leading-[34px] tracking-[-0.03em]">
        {state.here ? shell.thisSiteIsNot : shell.nobodyIsSignedIn}
      </h1>
      <p className="mt-2 text-[16px] leading-[22px] text-ink-2">
        {state.here ? shell.openItOnceWhile : shell.withoutANetworkNobody}
      </p>
      <div className="mt-4 flex flex-wrap gap-2">
        <ButtonLink className="min-h-[48px]" href={window.location.pathname}>
          {shell.tryAgain}
        </ButtonLink>
        <ButtonLink className="min-h-[48px]" href={paths.captureShell()}>
          {shell.sitesOnThisPhone}
        </ButtonLink>
      </div>
    </>
  );
}

/** What the phone keeps for whoever is signed in on it. */
export function KeptSites({ phone, state }: { phone: CapturePhone | null; state: PhoneState }) {
  const [sites, setSites] = useState<CaptureSnapshot[] | null>(null);
  useEffect(() => {
    let gone = false;
    phone?.snapshots().then(
      (kept) => !gone && setSites(kept),
      () => !gone && setSites([]), // the fault stands in the head
    );
    return () => {
      gone = true;
    };
  }, [phone]);
  if (!sites) return <p role="status">{shell.readingWhatThisPhone}</p>;
  return (
    <>
      <h1 className="text-[28px] leading-[34px] tracking-[-0.03em]">
        {sites.length === 0 ? shell.noSiteIsKept : shell.onThisPhone(sites.length)}
      </h1>
      <p className="mb-4 mt-2 text-[16px] leading-[22px] text-ink-2">
        {sites.length === 0 ? shell.openASitesPage : shell.theseOpenWithoutA}
      </p>
      {sites.length === 0 && state.ready && state.here === null && (
        <Notice kind="empty" title={shell.nobodyIsSignedIn}>
          {shell.signInWhileThere}
        </Notice>
      )}
      <ul className="border-t-2 border-ink bg-sheet empty:hidden">
        {sites.map((kept) => (
          <li key={kept.site.id} className="border-b border-rule-faint">
            <a href={paths.capture(kept.site.id)} className="block min-h-[48px] px-3 py-2 no-underline">
              <span className="block text-[17px] font-semibold">{kept.site.name}</span>
              <span className="text-sm text-ink-2">
                {shell.asOf(kept.strings.length, clockOrDate(kept.at, new Date(), kept.site.timeZone))}
              </span>
            </a>
          </li>
        ))}
      </ul>
      <ButtonLink className="mt-4 min-h-[48px]" href={paths.commissioning()}>
        {shell.toTheCommissioningPages}
      </ButtonLink>
    </>
  );
}
