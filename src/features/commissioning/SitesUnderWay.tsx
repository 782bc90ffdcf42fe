import { useMemo } from 'react';
import { STEP_NAMES, StepLink } from '../../components/commissioning/Steps';
import { ButtonLink } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Notice } from '../../components/ui/Notice';
import { SearchInput } from '../../components/ui/SearchInput';
import { Sheet } from '../../components/ui/Sheet';
import { RelativeTime } from '../../components/ui/Time';
import { currentStep, openGaps, STEPS } from '../../domain/commissioning/steps';
import { withQuery } from '../../lib/api';
import { useViewInUrl } from '../../lib/view-in-url';
import { paths } from '../../schemas/paths';
import type { SiteSteps, UnderWayView } from '../../schemas/api/commissioning';
import { daysInStep, listedSites, UNDER_WAY_DEFAULTS } from './under-way';
import { sitesUnderWay } from '../../words/commissioning';

interface Props {
  sites: readonly SiteSteps[];
  at: string;
  view: UnderWayView;
  mayCreate: boolean;
}

/** The steps of one site in a row: ticked, half, empty; each a link. */
function StepRow({ site }: { site: SiteSteps }) {
  return (
    <ol className="mb-4 grid grid-cols-2 gap-x-4 gap-y-1 sm:grid-cols-3 lg:grid-cols-6">
      {site.steps.map((step) => (
        <li key={step.key}>
          <StepLink site={site.id} step={step} className="py-1" />
        </li>
      ))}
    </ol>
  );
}

/** What blocks, a line a step: its first point and how many more. */
function Blocks({ site }: { site: SiteSteps }) {
  const blocking = site.steps.flatMap((step) => {
    const [first, ...more] = openGaps([step]);
    return first ? [{ step, first, more: more.length }] : [];
  });
  if (blocking.length === 0) return <p className="text-ink-2">{sitesUnderWay.nothingBlocksTheHandover}</p>;
  return (
    <>
      <h3 className="text-sm text-ink-2">{sitesUnderWay.blocksTheHandover}</h3>
      <ul className="mt-1">
        {blocking.map(({ step, first, more }) => (
          <li key={step.key}>
            {first.words}
            {more > 0 && (
              <>
                {' '}
                <a
                  href={`${paths.commissioningSite(site.id)}#step-${step.key}`}
                  className="text-petrol underline underline-offset-[3px]"
                >
                  {sitesUnderWay.andOf(more, STEP_NAMES[step.key])}
                </a>
              </>
            )}
          </li>
        ))}
      </ul>
    </>
  );
}

function Site({ site, at }: { site: SiteSteps; at: string }) {
  const current = currentStep(site.steps);
  const days = daysInStep(site, at);
  return (
    <Sheet
      id={`site-${site.id}`}
      title={
        <a href={paths.commissioningSite(site.id)} className="text-lg hover:underline">
          {site.name}
        </a>
      }
      aside={
        <>
          {site.place}
          {site.place && ' · '}
          {sitesUnderWay.countedStringsString(site.strings)}, {sitesUnderWay.countedUnitsUnit(site.units)}
        </>
      }
    >
      <StepRow site={site} />
      <div className="grid gap-x-8 gap-y-3 border-t border-rule-faint pt-3 lg:grid-cols-[minmax(0,1fr)_auto]">
        <div className="min-w-0">
          <Blocks site={site} />
        </div>
        <dl className="grid content-start gap-y-1 text-sm text-ink-2 lg:text-right">
          {current && (
            <div>
              <dt className="sr-only">{sitesUnderWay.step}</dt>
              <dd>
                {STEP_NAMES[current.key]}
                {days === null
                  ? sitesUnderWay.notBegun
                  : days === 0
                    ? sitesUnderWay.sinceToday
                    : `, ${sitesUnderWay.countedDaysDay(days)}`}
              </dd>
            </div>
          )}
          <div>
            <dt className="sr-only">{sitesUnderWay.onIt}</dt>
            <dd>
              {site.lastHand ? (
                <>
                  {site.lastHand.person},{' '}
                  <RelativeTime at={site.lastHand.at} now={at} timeZone={site.timeZone} />
                </>
              ) : (
                sitesUnderWay.nobodyYet
              )}
            </dd>
          </div>
          {site.rollCallRunning && (
            <div>
              <dt className="sr-only">{sitesUnderWay.rollCall}</dt>
              <dd>
                <a
                  href={paths.rollCall(site.id)}
                  className="font-medium text-petrol underline underline-offset-[3px]"
                >
                  {sitesUnderWay.theRollCallIs}
                </a>
              </dd>
            </div>
          )}
        </dl>
      </div>
    </Sheet>
  );
}

/** Sites being commissioned: step by step, what blocks each, who is on it. */
export function SitesUnderWay({ sites, at, view: initial, mayCreate }: Props) {
  const [view, change] = useViewInUrl(initial, UNDER_WAY_DEFAULTS);
  const shown = useMemo(() => listedSites(sites, view, at), [sites, view, at]);
  return (
    <>
      <form
        action={paths.commissioning()}
        className="no-print mb-4 flex flex-wrap items-center gap-x-3 gap-y-2"
        onSubmit={(event) => event.preventDefault()}
      >
        <SearchInput
          name="q"
          label={sitesUnderWay.filterByNamePlace}
          value={view.q}
          onChange={(typed) => change({ q: typed }, 'typed')}
          className="sm:w-[260px]"
        />
        <Choice
          inline
          label={sitesUnderWay.atStep}
          name="step"
          value={view.step}
          options={[
            { value: 'all', label: sitesUnderWay.any },
            ...STEPS.map((step) => ({ value: step, label: STEP_NAMES[step] })),
          ]}
          onChange={(step) => change({ step: step as UnderWayView['step'] })}
        />
        <Choice
          inline
          label={sitesUnderWay.sortedBy}
          name="sort"
          value={view.sort}
          options={[
            { value: 'name', label: sitesUnderWay.name },
            { value: 'days', label: sitesUnderWay.daysInStep },
            { value: 'blocks', label: sitesUnderWay.pointsThatBlock },
          ]}
          onChange={(sort) => change({ sort: sort as UnderWayView['sort'] })}
        />
        <span className="flex flex-wrap gap-2 sm:ml-auto">
          <ButtonLink href={withQuery(paths.api.commissioningCsv(), view)}>CSV</ButtonLink>
          {mayCreate && (
            <ButtonLink href={paths.newSite()} weight="primary">
              {sitesUnderWay.beginASite}
            </ButtonLink>
          )}
        </span>
      </form>
      {sites.length === 0 && <Notice kind="empty" title={sitesUnderWay.nothingIsUnderWay} />}
      {sites.length > 0 && shown.length === 0 && (
        <Notice kind="empty" title={sitesUnderWay.noSiteFitsThese}>
          {sitesUnderWay.clearTheSearchOr}
        </Notice>
      )}
      <div className="grid gap-5">
        {shown.map((site) => (
          <Site key={site.id} site={site} at={at} />
        ))}
      </div>
    </>
  );
}
