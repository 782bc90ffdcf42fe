import type { ReactNode } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { RESULT_MEANS } from '../../words/domain-shutdown-test';
import { listed, volts } from '../../drawings/numbers';
import { clockSeconds, fullTime, longDate } from '../../drawings/times';
import { paths } from '../../schemas/paths';
import type { ShutdownTestReport, SignedTest } from '../../schemas/api/shutdown-test';
import { HazardCard, Results } from './Results';
import { RepeatTest } from './RepeatTest';
import { RoundDrawing } from './RoundDrawing';
import { readingWords } from './StringRows';
import { roundName, stringsConcerned, stringsOfRound } from './round';
import { shutdownTestReportReport } from '../../words/shutdown-test-report';

interface Props {
  report: ShutdownTestReport;
  mayRun: boolean;
}

/** A signed test with its whole evidence, on screen and on paper. */
export function Report({ report, mayRun }: Props) {
  const { site, record, earlier } = report;
  const zone = record?.facts.zone.name ?? earlier?.zone ?? shutdownTestReportReport.theSite;
  const headline = record?.verdict.headline ?? `${zone}: ${earlier ? RESULT_MEANS[earlier.result] : ''}`;
  return (
    <>
      <Heading
        crumbs={[
          { label: shutdownTestReportReport.commissioning, href: paths.commissioning() },
          { label: site.name, href: paths.commissioningSite(site.id) },
          { label: shutdownTestReportReport.shutdownTests, href: paths.shutdownTests(site.id) },
        ]}
        finding={record ? `${zone}: ${headline}` : headline}
        sentence={
          report.signature ? (
            <>
              {shutdownTestReportReport.signedBy}
              <strong>{report.signature.name}</strong>
              {shutdownTestReportReport.itIsNeverChanged(report.signature.at, site.timeZone)}
            </>
          ) : (
            shutdownTestReportReport.recordedBeforeTestsWere
          )
        }
        actions={
          <>
            {mayRun && record && !report.supersededBy && (
              <RepeatTest
                siteId={site.id}
                zone={record.facts.zone.id}
                follows={report.id}
                label={
                  record.verdict.result === 'passed'
                    ? shutdownTestReportReport.startANewerTest
                    : shutdownTestReportReport.repeatForWhatIs
                }
              />
            )}
            <Button onClick={printWhole}>{shutdownTestReportReport.print}</Button>
          </>
        }
      />
      <div className="mb-5 grid gap-3 empty:hidden">
        {report.supersededBy && (
          <Notice
            kind="stale"
            title={shutdownTestReportReport.supersededByTheTest(report.supersededBy.at, site.timeZone)}
            action={
              <ButtonLink href={paths.shutdownTest(site.id, report.supersededBy.test)}>
                {shutdownTestReportReport.goToIt}
              </ButtonLink>
            }
          >
            {shutdownTestReportReport.itStandsAsIt}
          </Notice>
        )}
        {report.late.reports > 0 && (
          <Notice kind="stale" title={shutdownTestReportReport.ofTheseMinutesCame(report.late.reports)}>
            {shutdownTestReportReport.theLoggerSentLate(listed(report.late.strings))}
          </Notice>
        )}
        {record && !report.matches && (
          <Notice kind="failed" title={shutdownTestReportReport.theFingerprintDoesNot}>
            {shutdownTestReportReport.whatIsStoredIs}
          </Notice>
        )}
      </div>
      {record ? <Whole report={report} record={record} /> : <Earlier report={report} />}
    </>
  );
}

/** On paper everything lies open. */
function printWhole(): void {
  for (const folded of document.querySelectorAll('details')) folded.open = true;
  window.print();
}

function Fact({ name, children }: { name: string; children: ReactNode }) {
  return (
    <div className="border-t border-rule-faint py-2">
      <dt className="text-sm text-ink-2">{name}</dt>
      <dd>{children}</dd>
    </div>
  );
}

const LIGHTS = {
  bright: shutdownTestReportReport.bright,
  dull: shutdownTestReportReport.dull,
  snow: shutdownTestReportReport.snowOnTheModules,
  night: shutdownTestReportReport.night,
} as const;

function Whole({ report, record: signed }: { report: ShutdownTestReport; record: SignedTest }) {
  const { site } = report;
  const { facts, record, evidence, verdict } = signed;
  const { plan, caution } = record;
  const instrument = plan?.instrument ?? null;
  return (
    <div className="grid gap-5">
      <HazardCard verdict={verdict} />
      <Caution strong={shutdownTestReportReport.shutdownIsNotIsolation}>
        {shutdownTestReportReport.eachModuleAndIts}
      </Caution>
      <Results verdict={verdict} siteId={site.id} timeZone={site.timeZone} />
      {record.rounds.map((round, i) => {
        if (round.watchStarted === null) return null;
        const seen = evidence[i];
        const strings = stringsOfRound(
          facts,
          stringsConcerned(facts, plan?.strings ?? [], round.transmitter),
          round,
          seen,
        );
        const readings = round.readings;
        return (
          <Sheet
            key={i}
            id={`round-${i + 1}`}
            title={shutdownTestReportReport.roundIFacts(i, roundName(facts, round.transmitter))}
            aside={
              <time dateTime={round.watchStarted.at}>{fullTime(round.watchStarted.at, site.timeZone)}</time>
            }
            flush
          >
            <RoundDrawing facts={facts} strings={strings} round={round} seen={seen} limits={verdict.limits} />
            <dl className="mt-2 grid gap-x-6 sm:grid-cols-2">
              <Fact name={shutdownTestReportReport.commandReported}>
                {seen?.command
                  ? `${clockSeconds(seen.command.since, site.timeZone)}, ${seen.command.where}${seen.command.by ? shutdownTestReportReport.by(seen.command.by) : ''}`
                  : shutdownTestReportReport.notReported}
              </Fact>
              <Fact name={shutdownTestReportReport.commandNoted}>
                {round.operated
                  ? `${clockSeconds(round.operated.at, site.timeZone)}, ${round.operated.by}`
                  : shutdownTestReportReport.notNoted}
              </Fact>
              <Fact name={shutdownTestReportReport.releaseReported}>
                {seen?.release
                  ? clockSeconds(seen.release.since, site.timeZone)
                  : shutdownTestReportReport.notReported}
              </Fact>
              <Fact name={shutdownTestReportReport.releaseNoted}>
                {round.released
                  ? `${clockSeconds(round.released.at, site.timeZone)}, ${round.released.by}`
                  : shutdownTestReportReport.notNoted}
              </Fact>
            </dl>
            <h3 className="mt-3 font-medium">{shutdownTestReportReport.readingsOfTheInstrument}</h3>
            {readings.length === 0 ? (
              <p className="text-ink-2">{shutdownTestReportReport.noneReportsAloneDecide}</p>
            ) : (
              <ul>
                {strings.flatMap((s) =>
                  s.readings.map((r) => (
                    <li
                      key={r.id}
                      className={`border-b border-rule-faint py-1 last:border-b-0 ${r.struck ? 'text-ink-2' : ''}`}
                    >
                      <strong className="font-semibold">{s.part.name}</strong>{' '}
                      <span className={r.struck ? 'line-through' : ''}>{readingWords(r)}</span>{' '}
                      <span className="text-sm text-ink-2">
                        {clockSeconds(r.at, site.timeZone)}, {r.by}
                        {r.moment === 'after' &&
                          (r.secondsFrom === 'clock'
                            ? shutdownTestReportReport.secondsByThePages
                            : shutdownTestReportReport.secondsAsTyped)}
                        {r.struck && shutdownTestReportReport.struckBy(r.struck.by, r.struck.reason)}
                      </span>
                    </li>
                  )),
                )}
              </ul>
            )}
          </Sheet>
        );
      })}
      <div className="grid gap-5 lg:grid-cols-2">
        <Sheet id="people" title={shutdownTestReportReport.peopleAndCircumstances}>
          <dl>
            <Fact name={shutdownTestReportReport.onSite}>{plan?.onSite}</Fact>
            <Fact name={shutdownTestReportReport.operator}>{plan?.operator}</Fact>
            {plan?.others && <Fact name={shutdownTestReportReport.present}>{plan.others}</Fact>}
            <Fact name={shutdownTestReportReport.initiator}>
              {facts.initiator.name}
              {facts.initiator.place && `, ${facts.initiator.place}`}
            </Fact>
            <Fact name={shutdownTestReportReport.lightAndWeather}>
              {plan && LIGHTS[plan.light]}
              {plan?.weather && `, ${plan.weather}`}
            </Fact>
            {caution && (
              <Fact name={shutdownTestReportReport.cautionAccepted}>
                {caution.name}, {fullTime(caution.at, site.timeZone)}
              </Fact>
            )}
            {record.remarks.map((r) => (
              <Fact key={r.at} name={shutdownTestReportReport.remarkOf(r.by)}>
                {r.text}
              </Fact>
            ))}
          </dl>
        </Sheet>
        <Sheet id="instrument" title={shutdownTestReportReport.instrument}>
          {instrument ? (
            <dl>
              <Fact name={shutdownTestReportReport.makeAndModel}>{instrument.name}</Fact>
              <Fact name={shutdownTestReportReport.serialNumber}>{instrument.serial}</Fact>
              <Fact name={shutdownTestReportReport.rating}>
                {instrument.category === 'none'
                  ? shutdownTestReportReport.noCategoryMarked
                  : instrument.category}
                , {volts(instrument.ratedV)}
              </Fact>
              <Fact name={shutdownTestReportReport.calibratedOn}>
                {longDate(`${instrument.calibratedOn}T12:00:00Z`, 'UTC')}
              </Fact>
              <Fact name={shutdownTestReportReport.proved}>
                {instrument.provedBefore
                  ? shutdownTestReportReport.beforeTheTest
                  : shutdownTestReportReport.notBeforeTheTest}
                ,{' '}
                {record.provedAfter === null
                  ? shutdownTestReportReport.notAfterIt
                  : record.provedAfter
                    ? shutdownTestReportReport.rightAfterIt
                    : shutdownTestReportReport.wrongAfterIt}
              </Fact>
            </dl>
          ) : (
            <p>{shutdownTestReportReport.noneWasUsed}</p>
          )}
        </Sheet>
      </div>
      <Sheet id="signature" title={shutdownTestReportReport.signature}>
        <dl className="grid gap-x-6 sm:grid-cols-2">
          <Fact name={shutdownTestReportReport.signedByWhom}>
            {shutdownTestReportReport.withThePasswordEntered(signed.signature.name, signed.signature.role)}
          </Fact>
          <Fact name={shutdownTestReportReport.at}>{fullTime(signed.signature.at, site.timeZone)}</Fact>
          <Fact name={shutdownTestReportReport.fingerprintSigned}>
            <span className="break-all">{report.fingerprint}</span>
          </Fact>
          <Fact name={shutdownTestReportReport.fingerprintAgain}>
            <span className="break-all">{report.recomputed}</span>{' '}
            <strong className="font-semibold">
              {report.matches ? shutdownTestReportReport.theyAreTheSame : shutdownTestReportReport.theyDiffer}
            </strong>
          </Fact>
          {report.follows && (
            <Fact name={shutdownTestReportReport.repeats}>
              <a
                className="text-petrol hover:underline"
                href={paths.shutdownTest(site.id, report.follows.test)}
              >
                {shutdownTestReportReport.theTestOf(report.follows.at, site.timeZone)}
              </a>
            </Fact>
          )}
        </dl>
      </Sheet>
    </div>
  );
}

function Earlier({ report: { earlier, site } }: { report: ShutdownTestReport }) {
  if (!earlier) return null;
  return (
    <Sheet
      id="earlier"
      title={`${longDate(earlier.at, site.timeZone)}, ${earlier.madeBy}`}
      aside={shutdownTestReportReport.countedStringsString(earlier.strings)}
    >
      {earlier.readings.length === 0 ? (
        <p>{shutdownTestReportReport.noReadingsAreKept}</p>
      ) : (
        <ul>
          {earlier.readings.map((r) => (
            <li key={r.string} className="border-b border-rule-faint py-1 last:border-b-0">
              <strong className="font-semibold">{r.string}</strong>
              {shutdownTestReportReport.plusMinusAndEarth(r.volts[0], r.volts[1], r.volts[2])}
              {r.afterS !== null && shutdownTestReportReport.afterTheCommand(Math.round(r.afterS))}
            </li>
          ))}
        </ul>
      )}
    </Sheet>
  );
}
