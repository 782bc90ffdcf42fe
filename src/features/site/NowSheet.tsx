import { ButtonLink } from '../../components/ui/Button';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import { MixBar } from '../../drawings/MixBar';
import { MIX_WORDS, mixParts } from '../../drawings/mix';
import { number, percent, power } from '../../drawings/numbers';
import type { SitePage } from '../../schemas/api/site';
import { paths } from '../../schemas/paths';
import { nowSheet } from '../../words/site';

const RULES: Record<SitePage['ruleSet'], string> = {
  rapid_shutdown_30s: nowSheet.rapidShutdownWithin30,
  rapid_shutdown_10s: nowSheet.rapidShutdownWithin10,
  hazard_control: nowSheet.listedHazardControlSystem,
  none: nowSheet.noShutdownRule,
};
const TEST: Record<NonNullable<SitePage['lastShutdownTest']>['result'], string> = {
  passed: 'passed',
  failed: 'failed',
  consistent: nowSheet.consistentByTelemetryAlone,
  not_witnessed: nowSheet.notWitnessed,
};

/** Power against what the inverters can do, as a measure on a rule. */
function PowerMeasure({ watts, most }: { watts: number | null; most: number }) {
  const share = watts === null || most <= 0 ? null : Math.max(0, Math.min(1, watts / most));
  return (
    <div>
      <p className="text-[28px] font-semibold leading-9 tracking-[-0.02em]">
        {power(watts)} <span className="text-base font-normal text-ink-2">{nowSheet.ofMost(most)}</span>
      </p>
      <svg
        viewBox="0 0 200 10"
        width="100%"
        height="10"
        preserveAspectRatio="none"
        role="img"
        aria-label={share === null ? nowSheet.powerNotKnownJust : nowSheet.ofTheInvertersCapacity(share)}
        className="mt-1"
      >
        <rect width="200" height="10" fill="var(--rule-faint)" />
        {share !== null && <rect width={200 * share} height="10" fill="var(--petrol)" opacity="0.82" />}
      </svg>
      <p className="mt-1 text-sm text-ink-2">
        {share === null ? nowSheet.noInverterHasReported : nowSheet.ofWhatTheInverters(share)}
      </p>
    </div>
  );
}

const row = 'flex justify-between gap-4 border-b border-rule-faint py-1.5 last:border-b-0';

/** What holds at the site now: power, units by state, and whom to call. */
export function NowSheet({ page, now, zone }: { page: SitePage; now: string; zone: boolean }) {
  const { site, contact } = page;
  const parts = mixParts(site.counts);
  return (
    <Sheet
      id="now"
      title={nowSheet.now}
      aside={
        site.reportedAt ? (
          <>
            {nowSheet.newestReport}
            <SiteTime at={site.reportedAt} now={now} timeZone={site.timeZone} zone={zone} />
          </>
        ) : (
          nowSheet.noReportYet
        )
      }
    >
      <div className="grid gap-x-10 gap-y-6 md:grid-cols-2 xl:grid-cols-3">
        <PowerMeasure watts={site.power} most={site.acPowerMax} />
        <div>
          <div className="sm:hidden">
            <MixBar id="site-mix-narrow" counts={site.counts} width={300} height={22} />
          </div>
          <div className="hidden sm:block">
            <MixBar id="site-mix" counts={site.counts} width={380} height={22} />
          </div>
          <ul className="mt-2 flex flex-wrap gap-x-4 gap-y-0.5 text-[15px]">
            {parts.map((p) => (
              <li key={p.part}>
                <strong className="font-semibold">{number(p.units)}</strong> {MIX_WORDS[p.part]}
              </li>
            ))}
          </ul>
          <p className="mt-1 text-sm text-ink-2">
            {nowSheet.unitsInStrings(site.counts.units, site.strings)}
            {site.counts.unconfirmed > 0 && nowSheet.cantBeConfirmed(site.counts.unconfirmed)}
          </p>
        </div>
        <dl className="text-sm md:col-span-2 xl:col-span-1">
          <div className={row}>
            <dt className="text-ink-2">{nowSheet.contact}</dt>
            <dd className="text-right">
              {contact.name || '–'}
              {contact.phone && (
                <>
                  {' '}
                  <a href={`tel:${contact.phone.replace(/[^\d+]/g, '')}`} className="link whitespace-nowrap">
                    {contact.phone}
                  </a>
                </>
              )}
            </dd>
          </div>
          <div className={row}>
            <dt className="shrink-0 text-ink-2">{nowSheet.shutdownSwitch}</dt>
            <dd className="text-right">{contact.shutdownSwitchPlace || nowSheet.notRecorded}</dd>
          </div>
          <div className={row}>
            <dt className="text-ink-2">{nowSheet.ruleSet}</dt>
            <dd className="text-right">{RULES[page.ruleSet]}</dd>
          </div>
          <div className={row}>
            <dt className="text-ink-2">{nowSheet.lastShutdownTest}</dt>
            <dd className="text-right">
              <a href={paths.shutdownTests(site.id)} className="text-petrol hover:underline">
                {page.lastShutdownTest ? (
                  <>
                    {TEST[page.lastShutdownTest.result]},{' '}
                    <SiteTime at={page.lastShutdownTest.at} now={now} timeZone={site.timeZone} />
                  </>
                ) : (
                  nowSheet.noneRecorded
                )}
              </a>
            </dd>
          </div>
          <div className={row}>
            <dt className="text-ink-2">{nowSheet.performanceRatio30D}</dt>
            <dd>{percent(site.performanceRatio30d, 1)}</dd>
          </div>
        </dl>
      </div>
      <div className="no-print mt-4 flex flex-wrap gap-2">
        <ButtonLink href={paths.rollCall(site.id)}>
          {page.rollCall ? nowSheet.rollCallUnderWay(page.rollCall.personOnSite) : nowSheet.rollCall}
        </ButtonLink>
        <ButtonLink href={paths.customer(site.id)}>{nowSheet.customersPage}</ButtonLink>
      </div>
    </Sheet>
  );
}
