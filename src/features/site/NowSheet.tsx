import { ButtonLink } from '../../components/ui/Button';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import { MixBar } from '../../drawings/MixBar';
import { MIX_WORDS, mixParts } from '../../drawings/mix';
import { counted, number, percent, power } from '../../drawings/numbers';
import type { SitePage } from '../../schemas/api/site';
import { paths } from '../../schemas/paths';

const RULES: Record<SitePage['ruleSet'], string> = {
  rapid_shutdown_30s: 'Rapid shutdown within 30 s',
  rapid_shutdown_10s: 'Rapid shutdown within 10 s (older edition)',
  hazard_control: 'Listed hazard-control system',
  none: 'No shutdown rule',
};
const TEST: Record<NonNullable<SitePage['lastShutdownTest']>['result'], string> = {
  passed: 'passed',
  failed: 'failed',
  consistent: 'consistent by telemetry alone',
  not_witnessed: 'not witnessed',
};

/** Power against what the inverters can do, as a measure on a rule. */
function PowerMeasure({ watts, most }: { watts: number | null; most: number }) {
  const share = watts === null || most <= 0 ? null : Math.max(0, Math.min(1, watts / most));
  return (
    <div>
      <p className="text-[28px] font-semibold leading-9 tracking-[-0.02em]">
        {power(watts)} <span className="text-base font-normal text-ink-2">of {power(most)}</span>
      </p>
      <svg
        viewBox="0 0 200 10"
        width="100%"
        height="10"
        preserveAspectRatio="none"
        role="img"
        aria-label={
          share === null ? 'Power not known just now' : `${percent(share)} of the inverters' capacity`
        }
        className="mt-1"
      >
        <rect width="200" height="10" fill="var(--rule-faint)" />
        {share !== null && <rect width={200 * share} height="10" fill="var(--petrol)" opacity="0.82" />}
      </svg>
      <p className="mt-1 text-sm text-ink-2">
        {share === null
          ? 'No inverter has reported lately.'
          : `${percent(share)} of what the inverters can do`}
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
      title="Now"
      aside={
        site.reportedAt ? (
          <>
            newest report <SiteTime at={site.reportedAt} now={now} timeZone={site.timeZone} zone={zone} />
          </>
        ) : (
          'no report yet'
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
            {counted(site.counts.units, 'unit')} in {counted(site.strings, 'string')}
            {site.counts.unconfirmed > 0 && `; ${number(site.counts.unconfirmed)} can't be confirmed`}
          </p>
        </div>
        <dl className="text-sm md:col-span-2 xl:col-span-1">
          <div className={row}>
            <dt className="text-ink-2">Contact</dt>
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
            <dt className="shrink-0 text-ink-2">Shutdown switch</dt>
            <dd className="text-right">{contact.shutdownSwitchPlace || 'not recorded'}</dd>
          </div>
          <div className={row}>
            <dt className="text-ink-2">Rule set</dt>
            <dd className="text-right">{RULES[page.ruleSet]}</dd>
          </div>
          <div className={row}>
            <dt className="text-ink-2">Last shutdown test</dt>
            <dd className="text-right">
              <a href={paths.shutdownTests(site.id)} className="text-petrol hover:underline">
                {page.lastShutdownTest ? (
                  <>
                    {TEST[page.lastShutdownTest.result]},{' '}
                    <SiteTime at={page.lastShutdownTest.at} now={now} timeZone={site.timeZone} />
                  </>
                ) : (
                  'none recorded'
                )}
              </a>
            </dd>
          </div>
          <div className={row}>
            <dt className="text-ink-2">Performance ratio, 30 d</dt>
            <dd>{percent(site.performanceRatio30d, 1)}</dd>
          </div>
        </dl>
      </div>
      <div className="no-print mt-4 flex flex-wrap gap-2">
        <ButtonLink href={paths.rollCall(site.id)}>
          {page.rollCall ? `Roll call under way, ${page.rollCall.personOnSite} on site` : 'Roll call'}
        </ButtonLink>
        <ButtonLink href={paths.customer(site.id)}>Customer's page</ButtonLink>
      </div>
    </Sheet>
  );
}
