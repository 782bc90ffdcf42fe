import { Sheet } from '../../components/ui/Sheet';
import { Notice } from '../../components/ui/Notice';
import { SiteTime } from '../../components/ui/Time';
import { RollCallCurve } from '../../drawings/RollCallCurve';
import type { RollCallPage } from '../../schemas/api/roll-call';
import { curveOf, type RollTally } from './tally';
import type { RollCallOutlook } from './outlook';
import { curveSheet } from '../../words/commissioning';

interface Props {
  page: RollCallPage;
  tally: RollTally;
  now: Date;
  outlook: RollCallOutlook | null;
}

/** The curve of answers since the start, with the forecast dashed in its band. */
export function CurveSheet({ page, tally, now, outlook }: Props) {
  const { run, site } = page;
  if (!run) {
    if (tally.roster === 0) return null;
    return (
      <Sheet id="curve" title={curveSheet.rollCall}>
        <Notice kind="empty" title={curveSheet.theCurveBeginsWhen}>
          {tally.heard > 0 ? curveSheet.answeredBeforeAnyRoll(tally.heard) : curveSheet.eachUnitThatAnswers}
        </Notice>
      </Sheet>
    );
  }
  const startS = new Date(run.startedAt).getTime() / 1000;
  const endS = (run.stoppedAt ? new Date(run.stoppedAt) : now).getTime() / 1000;
  const curve = curveOf(tally, startS);
  const since = curve.points.map((p) => Math.max(0, p.atS - startS));
  const heardAtS = [...Array.from({ length: curve.before }, () => 0), ...since];
  const drawn = {
    total: tally.roster,
    heardAtS,
    nowS: Math.max(0, endS - startS, since.at(-1) ?? 0),
    forecast: (outlook?.curve ?? []).map((p) => ({ ...p, atS: p.atS - startS })),
  };
  const listening = page.gateways.filter((g) => !g.silent).length;
  return (
    <Sheet
      id="curve"
      title={curveSheet.rollCall}
      flush
      aside={
        <>
          {curveSheet.started}
          <SiteTime at={run.startedAt} now={page.at} timeZone={site.timeZone} zone />
          {run.stoppedAt ? (
            <>
              {curveSheet.stopped}
              <SiteTime at={run.stoppedAt} now={page.at} timeZone={site.timeZone} />
            </>
          ) : (
            page.gateways.length > 0 && curveSheet.gatewayOfListening(listening, page.gateways.length)
          )}
        </>
      }
    >
      <div className="hidden sm:block">
        <RollCallCurve {...drawn} width={720} height={290} />
      </div>
      <div className="sm:hidden">
        <RollCallCurve {...drawn} width={360} height={230} />
      </div>
      {curve.before > 0 && (
        <p className="mt-2 text-sm text-ink-2">{curveSheet.hadAnsweredBeforeThis(curve.before)}</p>
      )}
    </Sheet>
  );
}
