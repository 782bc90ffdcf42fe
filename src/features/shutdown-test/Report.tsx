import type { ReactNode } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { RESULT_MEANS } from '../../domain/commissioning/shutdown-test-words';
import { counted, listed, volts } from '../../drawings/numbers';
import { clockSeconds, fullTime, longDate } from '../../drawings/times';
import { paths } from '../../schemas/paths';
import type { ShutdownTestReport, SignedTest } from '../../schemas/api/shutdown-test';
import { HazardCard, Results } from './Results';
import { RepeatTest } from './RepeatTest';
import { RoundDrawing } from './RoundDrawing';
import { readingWords } from './StringRows';
import { roundName, stringsConcerned, stringsOfRound } from './round';

interface Props {
  report: ShutdownTestReport;
  mayRun: boolean;
}

/** A signed test with its whole evidence, on screen and on paper. */
export function Report({ report, mayRun }: Props) {
  const { site, record, earlier } = report;
  const zone = record?.facts.zone.name ?? earlier?.zone ?? 'The site';
  const headline = record?.verdict.headline ?? `${zone}: ${earlier ? RESULT_MEANS[earlier.result] : ''}`;
  return (
    <>
      <Heading
        crumbs={[
          { label: 'Commissioning', href: paths.commissioning() },
          { label: site.name, href: paths.commissioningSite(site.id) },
          { label: 'Shutdown tests', href: paths.shutdownTests(site.id) },
        ]}
        finding={record ? `${zone}: ${headline}` : headline}
        sentence={
          report.signature ? (
            <>
              Signed by <strong>{report.signature.name}</strong>,{' '}
              {fullTime(report.signature.at, site.timeZone)}. It is never changed; only a newer one supersedes
              it.
            </>
          ) : (
            'Recorded before tests were signed here: it says less, and nothing shows that it is unchanged.'
          )
        }
        actions={
          <>
            {mayRun && record && !report.supersededBy && (
              <RepeatTest
                siteId={site.id}
                zone={record.facts.zone.id}
                follows={report.id}
                label={record.verdict.result === 'passed' ? 'Start a newer test' : 'Repeat for what is open'}
              />
            )}
            <Button onClick={printWhole}>Print</Button>
          </>
        }
      />
      <div className="mb-5 grid gap-3 empty:hidden">
        {report.supersededBy && (
          <Notice
            kind="stale"
            title={`Superseded by the test of ${longDate(report.supersededBy.at, site.timeZone)}`}
            action={
              <ButtonLink href={paths.shutdownTest(site.id, report.supersededBy.test)}>Go to it</ButtonLink>
            }
          >
            It stands as it was signed; what holds today is in the newer one.
          </Notice>
        )}
        {report.late.reports > 0 && (
          <Notice
            kind="stale"
            title={`${counted(report.late.reports, 'report')} of these minutes came after the signature`}
          >
            {listed(report.late.strings)}: the logger sent late. They don’t change what was signed. A new test
            takes them in.
          </Notice>
        )}
        {record && !report.matches && (
          <Notice kind="failed" title="The fingerprint does not fit the data">
            What is stored is not what was signed. Don’t rely on it; tell whoever looks after this
            installation.
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

const LIGHTS = { bright: 'bright', dull: 'dull', snow: 'snow on the modules', night: 'night' } as const;

function Whole({ report, record: signed }: { report: ShutdownTestReport; record: SignedTest }) {
  const { site } = report;
  const { facts, record, evidence, verdict } = signed;
  const { plan, caution } = record;
  const instrument = plan?.instrument ?? null;
  return (
    <div className="grid gap-5">
      <HazardCard verdict={verdict} />
      <Caution strong="Shutdown is not isolation.">
        Each module and its leads to its unit stay at module voltage. Isolate, lock out, prove dead with a
        rated meter; local code and the authority having jurisdiction come first.
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
            title={`Round ${i + 1}: ${roundName(facts, round.transmitter)}`}
            aside={
              <time dateTime={round.watchStarted.at}>{fullTime(round.watchStarted.at, site.timeZone)}</time>
            }
            flush
          >
            <RoundDrawing facts={facts} strings={strings} round={round} seen={seen} limits={verdict.limits} />
            <dl className="mt-2 grid gap-x-6 sm:grid-cols-2">
              <Fact name="Command, as the logger reported it">
                {seen?.command
                  ? `${clockSeconds(seen.command.since, site.timeZone)}, ${seen.command.where}${seen.command.by ? `, by ${seen.command.by}` : ''}`
                  : 'not reported'}
              </Fact>
              <Fact name="Command, as a person noted it">
                {round.operated
                  ? `${clockSeconds(round.operated.at, site.timeZone)}, ${round.operated.by}`
                  : 'not noted'}
              </Fact>
              <Fact name="Release, as the logger reported it">
                {seen?.release ? clockSeconds(seen.release.since, site.timeZone) : 'not reported'}
              </Fact>
              <Fact name="Release, as a person noted it">
                {round.released
                  ? `${clockSeconds(round.released.at, site.timeZone)}, ${round.released.by}`
                  : 'not noted'}
              </Fact>
            </dl>
            <h3 className="mt-3 font-medium">Readings of the instrument</h3>
            {readings.length === 0 ? (
              <p className="text-ink-2">None: reports alone decide nothing.</p>
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
                            ? ', seconds by the page’s clock'
                            : ', seconds as typed')}
                        {r.struck && `; struck by ${r.struck.by}: ${r.struck.reason}`}
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
        <Sheet id="people" title="People and circumstances">
          <dl>
            <Fact name="On site">{plan?.onSite}</Fact>
            <Fact name="Operated the initiator">{plan?.operator}</Fact>
            {plan?.others && <Fact name="Present">{plan.others}</Fact>}
            <Fact name="Initiator">
              {facts.initiator.name}
              {facts.initiator.place && `, ${facts.initiator.place}`}
            </Fact>
            <Fact name="Light and weather">
              {plan && LIGHTS[plan.light]}
              {plan?.weather && `, ${plan.weather}`}
            </Fact>
            {caution && (
              <Fact name="Caution accepted">
                {caution.name}, {fullTime(caution.at, site.timeZone)}
              </Fact>
            )}
            {record.remarks.map((r) => (
              <Fact key={r.at} name={`Remark of ${r.by}`}>
                {r.text}
              </Fact>
            ))}
          </dl>
        </Sheet>
        <Sheet id="instrument" title="Instrument">
          {instrument ? (
            <dl>
              <Fact name="Make and model">{instrument.name}</Fact>
              <Fact name="Serial number">{instrument.serial}</Fact>
              <Fact name="Rating">
                {instrument.category === 'none' ? 'no category marked' : instrument.category},{' '}
                {volts(instrument.ratedV)}
              </Fact>
              <Fact name="Calibrated on">{longDate(`${instrument.calibratedOn}T12:00:00Z`, 'UTC')}</Fact>
              <Fact name="Proved on a known source">
                {instrument.provedBefore ? 'before the test' : 'not before the test'},{' '}
                {record.provedAfter === null
                  ? 'not after it'
                  : record.provedAfter
                    ? 'right after it'
                    : 'wrong after it'}
              </Fact>
            </dl>
          ) : (
            <p>None was used.</p>
          )}
        </Sheet>
      </div>
      <Sheet id="signature" title="Signature">
        <dl className="grid gap-x-6 sm:grid-cols-2">
          <Fact name="Signed by">
            {signed.signature.name} ({signed.signature.role}), with the password entered again
          </Fact>
          <Fact name="At">{fullTime(signed.signature.at, site.timeZone)}</Fact>
          <Fact name="Fingerprint as signed (SHA-256)">
            <span className="break-all">{report.fingerprint}</span>
          </Fact>
          <Fact name="Taken again from the stored data">
            <span className="break-all">{report.recomputed}</span>{' '}
            <strong className="font-semibold">
              {report.matches ? 'They are the same.' : 'They differ.'}
            </strong>
          </Fact>
          {report.follows && (
            <Fact name="Repeats">
              <a
                className="text-petrol hover:underline"
                href={paths.shutdownTest(site.id, report.follows.test)}
              >
                the test of {longDate(report.follows.at, site.timeZone)}
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
      aside={counted(earlier.strings, 'string')}
    >
      {earlier.readings.length === 0 ? (
        <p>No readings are kept with it.</p>
      ) : (
        <ul>
          {earlier.readings.map((r) => (
            <li key={r.string} className="border-b border-rule-faint py-1 last:border-b-0">
              <strong className="font-semibold">{r.string}</strong> + to − {volts(r.volts[0])}, + to earth{' '}
              {volts(r.volts[1])}, − to earth {volts(r.volts[2])}
              {r.afterS !== null && `, ${Math.round(r.afterS)} s after the command`}
            </li>
          ))}
        </ul>
      )}
    </Sheet>
  );
}
