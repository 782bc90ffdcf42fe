import { Notice } from '../../components/ui/Notice';
import { Tag } from '../../components/ui/Tag';
import { clockOrDate } from '../../drawings/times';
import { ofPerson, type Waiting } from '../../lib/capture-queue';
import { Decision } from './Decision';
import { Thumbnail } from './Photos';
import type { SiteProps } from './screen';
import { waitingScreen } from '../../words/capture';

/** What this person recorded on this phone and the server does not have yet. */
export function WaitingScreen(props: SiteProps) {
  const { phone, state, site, clock } = props;
  const mine = ofPerson(state.records, site.person.id);
  const decisions = mine.filter((r) => r.state !== 'waiting').length;
  if (!state.ready) return <p role="status">{waitingScreen.readingWhatThisPhone}</p>;
  const heading =
    mine.length === 0
      ? waitingScreen.nothingWaitsTheServer
      : decisions > 0
        ? waitingScreen.ofYourDecision(decisions, mine.length)
        : waitingScreen.mine1OneRecord(mine.length);
  return (
    <div>
      <h1 tabIndex={-1} className="text-[28px] leading-[34px] tracking-[-0.03em] outline-none">
        {heading}
      </h1>
      <p className="mb-4 mt-1 text-[16px] leading-[22px] text-ink-2">
        {mine.length === 0
          ? waitingScreen.whatYouRecordNext
          : state.lasting
            ? waitingScreen.theyAreKeptOn
            : waitingScreen.thisBrowserKeepsNothing}
      </p>
      {mine.length === 0 ? (
        <Notice kind="done" title={waitingScreen.allSent} />
      ) : (
        <ol className="border-t-2 border-ink bg-sheet">
          {mine.map((record) => (
            <li key={record.ref} className="border-b border-rule-faint px-3 py-3">
              <div className="flex items-start gap-3">
                {record.kind === 'photo' && (
                  <Thumbnail phone={phone} photo={record} share={state.progress[record.ref]} />
                )}
                <div className="min-w-0 flex-1">
                  <p className="text-[16px] font-semibold leading-[22px]">{record.label}</p>
                  <p className="text-sm text-ink-2">
                    {waitingScreen.recordedMadeAt(clockOrDate(record.madeAt, clock, site.site.timeZone))}
                    {record.site === site.site.id ? '' : waitingScreen.atAnotherSite}
                    {record.tries > 0 && record.state === 'waiting'
                      ? waitingScreen.triedTimes(record.tries)
                      : ''}
                  </p>
                </div>
                <StateWord record={record} sending={state.sending === record.ref} />
              </div>
              {record.state !== 'waiting' && <Decision {...props} record={record} />}
            </li>
          ))}
        </ol>
      )}
    </div>
  );
}

function StateWord({ record, sending }: { record: Waiting; sending: boolean }) {
  if (sending) return <Tag tone="petrol">{waitingScreen.sending}</Tag>;
  switch (record.state) {
    case 'waiting':
      return <Tag tone="outline">{waitingScreen.waiting}</Tag>;
    case 'conflict':
      return <Tag tone="rust">{waitingScreen.twoVersions}</Tag>;
    case 'refused':
      return <Tag tone="rust">{waitingScreen.refused}</Tag>;
  }
}
