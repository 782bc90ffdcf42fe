import type { ReactNode } from 'react';
import { ButtonLink } from '../../components/ui/Button';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import { counted, number } from '../../drawings/numbers';
import { longDate } from '../../drawings/times';
import { paths } from '../../schemas/paths';
import type { SiteUnderWay } from '../../schemas/api/commissioning';

const RESULTS = {
  passed: 'passed',
  failed: 'not passed',
  consistent: 'readings agree, not measured by meter',
  not_witnessed: 'not witnessed',
} as const;

function Known({ name, children }: { name: string; children: ReactNode }) {
  return (
    <div className="border-t border-rule-faint py-2 sm:border-0 sm:py-0">
      <dt className="text-sm text-ink-2">{name}</dt>
      <dd>{children}</dd>
    </div>
  );
}

function RollCallNow({ site, at }: { site: SiteUnderWay; at: string }) {
  const { rollCall } = site;
  if (site.roster === 0) return <>its units cannot answer one</>;
  return (
    <>
      {number(site.heard)} of {number(site.roster)} heard
      {site.heardUnknown > 0 && `, ${number(site.heardUnknown)} not on the as-built`}
      <span className="block text-sm text-ink-2">
        {!rollCall && 'not started'}
        {rollCall && !rollCall.stoppedAt && (
          <>
            running since <SiteTime at={rollCall.startedAt} now={at} timeZone={site.timeZone} zone />, on
            site: {rollCall.personOnSite}
          </>
        )}
        {rollCall?.stoppedAt && (
          <>
            stopped <SiteTime at={rollCall.stoppedAt} now={at} timeZone={site.timeZone} zone />
          </>
        )}
      </span>
    </>
  );
}

/** The share of the roll that has answered, as a line that fills. */
function Share({ site }: { site: SiteUnderWay }) {
  if (site.roster === 0) return null;
  const share = site.heard / site.roster;
  return (
    <svg
      width="100%"
      height="8"
      viewBox="0 0 100 8"
      preserveAspectRatio="none"
      aria-hidden="true"
      className="mb-4 block"
    >
      <rect x="0" y="5" width="100" height="3" fill="var(--rule-faint)" />
      <rect x="0" y="2" width={share * 100} height="6" fill="var(--petrol)" />
    </svg>
  );
}

/** Sites being commissioned, with what is recorded of each today. */
export function SitesUnderWay({ sites, at }: { sites: readonly SiteUnderWay[]; at: string }) {
  if (sites.length === 0) return <Notice kind="empty" title="Nothing is under way" />;
  return (
    <div className="grid gap-5">
      {sites.map((site) => (
        <Sheet
          key={site.id}
          id={`site-${site.id}`}
          title={
            <a href={paths.site(site.id)} className="text-lg hover:underline">
              {site.name}
            </a>
          }
          aside={site.place}
        >
          <Share site={site} />
          <dl className="grid gap-x-6 gap-y-3 sm:grid-cols-2 lg:grid-cols-4">
            <Known name="As-built">
              {site.placed === site.slots
                ? counted(site.slots, 'unit')
                : `${number(site.placed)} of ${counted(site.slots, 'unit')} placed`}
              , {counted(site.strings, 'string')}
            </Known>
            <Known name="Roll call">
              <RollCallNow site={site} at={at} />
            </Known>
            <Known name="Meter readings">
              {site.readings.lastAt ? (
                <>
                  {site.readings.strings} of {counted(site.strings, 'string')}, last{' '}
                  <SiteTime at={site.readings.lastAt} now={at} timeZone={site.timeZone} zone />
                </>
              ) : (
                'none recorded'
              )}
            </Known>
            {site.checks.strings > 0 && (
              <Known name="Install checks">
                {site.checks.strings} of {counted(site.strings, 'string')}
                {site.checks.failed > 0 && `, ${counted(site.checks.failed, 'check')} failed`}
              </Known>
            )}
            <Known name="Shutdown test">
              {site.lastTest
                ? `${RESULTS[site.lastTest.result]}, ${longDate(site.lastTest.at, site.timeZone)}`
                : 'none on record'}
            </Known>
          </dl>
          {site.roster > 0 && (
            <ButtonLink href={paths.rollCall(site.id)} weight="primary" className="mt-5">
              {site.rollCall && !site.rollCall.stoppedAt ? 'Watch the roll call' : 'Go to the roll call'}
            </ButtonLink>
          )}
        </Sheet>
      ))}
    </div>
  );
}
