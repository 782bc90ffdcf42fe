import { useQuery } from '@tanstack/react-query';
import type { ReactNode } from 'react';
import {
  STATE_MARK,
  STATE_WORDS,
  StepBox,
  STEP_NAMES,
  STEP_PAGES,
} from '../../components/commissioning/Steps';
import { ButtonLink } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { LiveHeading } from '../../components/ui/LiveHeading';
import { NotRead } from '../../components/ui/NotRead';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import { openGaps } from '../../domain/commissioning/steps';
import { api } from '../../lib/api';
import { useLive } from '../../lib/live-hook';
import { queryClient } from '../../lib/query-client';
import { paths } from '../../schemas/paths';
import type { SiteSteps, StepNow } from '../../schemas/api/commissioning';
import { Gaps } from './Gaps';
import { siteHeading } from './under-way';
import { siteOverview } from '../../words/commissioning';

interface Props {
  initial: SiteSteps;
  at: string;
  mayAccept: boolean;
  /** How to open the phone's page: made by the server. */
  children?: ReactNode;
}

const DO: Record<StepNow['key'], string> = {
  as_built: siteOverview.openTheAsBuilt,
  install_checks: siteOverview.openTheInstallChecks,
  meter_readings: siteOverview.openTheReadings,
  roll_call: siteOverview.openTheRollCall,
  shutdown_test: siteOverview.openTheShutdownTests,
  handover: siteOverview.openTheHandover,
};
const MOST_GAPS = 6;

function StepSheet({
  site,
  step,
  at,
  mayAccept,
  onAccepted,
}: {
  site: SiteSteps;
  step: StepNow;
  at: string;
  mayAccept: boolean;
  onAccepted: () => void;
}) {
  const open = step.gaps.filter((g) => !g.accepted);
  // what has not begun is no list of faults: its points are one tap away
  const shown = step.state === 'not_started' && step.gaps.length > 1 ? 0 : MOST_GAPS;
  const rest = step.gaps.length - shown;
  return (
    <Sheet
      id={`step-${step.key}`}
      title={
        <span className="flex items-center gap-2.5">
          <StepBox mark={STATE_MARK[step.state]} />
          <span>
            {STEP_NAMES[step.key]}
            <span className="sr-only">, {STATE_WORDS[step.state]}</span>
          </span>
        </span>
      }
      aside={
        <>
          {step.words}
          {step.startedAt && (
            <>
              {siteOverview.since}
              <SiteTime at={step.startedAt} now={at} timeZone={site.timeZone} />
            </>
          )}
        </>
      }
    >
      {step.gaps.length > 0 && shown > 0 && (
        <Gaps site={site.id} gaps={step.gaps.slice(0, shown)} mayAccept={mayAccept} onAccepted={onAccepted} />
      )}
      {rest > 0 && (
        <details className={shown > 0 ? 'border-t border-rule-faint pt-1' : ''}>
          <summary className="target cursor-pointer text-petrol">
            {shown > 0 ? siteOverview.countedRestMorePoint(rest) : siteOverview.restOpen(rest)}
          </summary>
          <Gaps site={site.id} gaps={step.gaps.slice(shown)} mayAccept={mayAccept} onAccepted={onAccepted} />
        </details>
      )}
      {step.gaps.length === 0 && step.key !== 'handover' && step.state === 'done' && (
        <p className="text-ink-2">{siteOverview.nothingIsOpen}</p>
      )}
      <ButtonLink
        href={STEP_PAGES[step.key](site.id)}
        weight={open.length > 0 && step.state === 'under_way' ? 'primary' : 'plain'}
        className="mt-3"
      >
        {DO[step.key]}
      </ButtonLink>
    </Sheet>
  );
}

/** One site on its way: each step, what blocks it, where it is worked on. */
export function SiteOverview({ initial, at, mayAccept, children }: Props) {
  const client = queryClient();
  const key = ['commissioning', initial.id];
  const { data: site, error } = useQuery(
    {
      queryKey: key,
      queryFn: ({ signal }) => api<SiteSteps>(paths.api.commissioningSite(initial.id), { signal }),
      initialData: initial,
      refetchInterval: 60_000,
    },
    client,
  );
  const again = () => void client.invalidateQueries({ queryKey: key });
  const status = useLive(`site:${initial.id}`, (_, kind) => {
    if (kind === 'delta') again();
  });
  const finding = siteHeading(site);
  const links: [string, string][] = [
    [siteOverview.designChecks, paths.designChecks(site.id)],
    [siteOverview.roofPlan, paths.roofPlan(site.id)],
    [siteOverview.walkAndLadderCard, paths.walk(site.id)],
    [siteOverview.whichStringAUnit, paths.membership(site.id)],
    [siteOverview.whoChangedWhat, paths.asBuiltHistory(site.id)],
    [siteOverview.theSiteAsIt, paths.site(site.id)],
  ];
  return (
    <>
      <LiveHeading
        finding={{ heading: finding.finding, sentence: finding.sentence }}
        status={status}
        timeZone={site.timeZone}
        crumbs={[{ label: siteOverview.commissioning, href: paths.commissioning() }, { label: site.name }]}
      />
      <NotRead error={error} title={siteOverview.theStepsCouldNot} className="mb-4" />
      <div className="grid gap-5 lg:grid-cols-[minmax(0,1fr)_340px]">
        <div className="grid min-w-0 content-start gap-5">
          {site.steps.map((step) => (
            <StepSheet
              key={step.key}
              site={site}
              step={step}
              at={at}
              mayAccept={mayAccept && step.key !== 'handover'}
              onAccepted={again}
            />
          ))}
        </div>
        <div className="grid content-start gap-5">
          {openGaps(site.steps).length > 0 && (
            <Caution strong={siteOverview.treatEveryStringAs}>
              {siteOverview.localCodeAndThe(
                site.steps.every(
                  (s) => (s.key !== 'roll_call' && s.key !== 'shutdown_test') || s.state === 'done',
                ),
              )}
            </Caution>
          )}
          {children}
          <Sheet id="more" title={siteOverview.alsoForThisSite}>
            <ul>
              {links.map(([words, href]) => (
                <li key={href}>
                  <a href={href} className="target inline-flex items-center text-petrol hover:underline">
                    {words}
                  </a>
                </li>
              ))}
            </ul>
          </Sheet>
        </div>
      </div>
    </>
  );
}
