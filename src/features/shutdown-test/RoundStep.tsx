import { useCallback, useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Dialog } from '../../components/ui/Dialog';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { useNow } from '../../components/ui/Time';
import type { TestReading } from '../../domain/commissioning/shutdown-test-record';
import { clock, clockSeconds } from '../../drawings/times';
import { ReadingEntry } from './ReadingEntry';
import { RoundDrawing } from './RoundDrawing';
import { StringRows } from './StringRows';
import { commandedAtS, returnOf, roundName, stringsConcerned, stringsOfRound, type StringNow } from './round';
import type { TestInHand } from './use-test';

const mmss = (s: number): string => `${Math.floor(s / 60)}:${String(Math.floor(s % 60)).padStart(2, '0')}`;

interface Props {
  test: TestInHand;
  index: number;
  mayWrite: boolean;
  onEnded: () => void;
}

/** Steps 3 to 5 of one round: watch, a person operates, read, release, watch the return. */
export function RoundStep({ test, index, mayWrite, onEnded }: Props) {
  const { page, record, act } = test;
  const { facts, verdict, watch } = page;
  const round = record.rounds[index]!;
  const seen = page.evidence[index];
  const now = useNow(page.at, 500).getTime();
  const [reading, setReading] = useState<{ string: StringNow; moment: 'before' | 'after' } | null>(null);
  const [strike, setStrike] = useState<TestReading | null>(null);
  const [why, setWhy] = useState('');
  const zone = facts.site.timeZone;
  const concerned = stringsConcerned(facts, record.plan?.strings ?? [], round.transmitter);
  const strings = stringsOfRound(facts, concerned, round, seen);
  const { afterS: timeLimitS } = verdict.limits;
  const commandS = commandedAtS(round, seen);
  const tappedS = round.operated ? Date.parse(round.operated.at) / 1000 : null;
  // the person's own clock first: the instrument is in the same hands
  const originS = tappedS ?? commandS;
  const sinceS = originS === null ? null : Math.max(0, now / 1000 - originS);
  const { now: serverNow } = test;
  const clockS = useCallback(
    () => (originS === null ? null : Math.max(0, serverNow() / 1000 - originS)),
    [originS, serverNow],
  );
  const released = round.released !== null || Boolean(seen?.release);
  const what =
    round.transmitter === null
      ? facts.initiator.name
      : roundName(facts, round.transmitter).replace(' off alone', '');
  const verb = round.transmitter === null ? 'operated' : 'taken off';
  const back = returnOf(seen);
  if (round.watchStarted === null)
    return (
      <Sheet
        id="round"
        title={`Round ${index + 1} of ${record.rounds.length}: ${roundName(facts, round.transmitter)}`}
      >
        <WatchState test={test} />
        {round.transmitter !== null && (
          <p className="mb-3">
            A person isolates the supply of {what} by hand; every other transmitter keeps running. Only{' '}
            {strings.map((s) => s.part.name).join(', ') || 'no string'} may shut down.
          </p>
        )}
        {watch.inForce.length > 0 && (
          <div className="mb-3">
            <Notice
              kind="stale"
              title={`${watch.inForce.map((c) => c.where).join(', ')}: shutdown is in force already`}
            >
              Since {clock(watch.inForce[0]!.since, zone)}. Release it and let the strings come back: what is
              down before the command shows nothing.
            </Notice>
          </div>
        )}
        {mayWrite && (
          <Button
            weight="primary"
            className="w-full sm:w-auto"
            onClick={() => act({ kind: 'watch_started', round: index })}
          >
            Start watching
          </Button>
        )}
      </Sheet>
    );
  return (
    <div className="grid gap-5">
      <Clock sinceS={sinceS} limitS={timeLimitS} released={released} />
      <Sheet
        id="round"
        title={`Round ${index + 1} of ${record.rounds.length}: ${roundName(facts, round.transmitter)}`}
        aside={`watched since ${clockSeconds(round.watchStarted.at, zone)}`}
      >
        <WatchState test={test} />
        <dl className="mt-1 text-sm text-ink-2">
          <div className="flex flex-wrap gap-x-2">
            <dt>Command by the logger’s report:</dt>
            <dd>
              {seen?.command
                ? `${clockSeconds(seen.command.since, zone)}, ${seen.command.where}`
                : 'none yet'}
              {seen?.command &&
                !round.ended &&
                !released &&
                ` (${mmss(Math.max(0, now / 1000 - Date.parse(seen.command.since) / 1000))} ago)`}
            </dd>
          </div>
          <div className="flex flex-wrap gap-x-2">
            <dt>As a person noted it:</dt>
            <dd>
              {round.operated ? `${clockSeconds(round.operated.at, zone)}, ${round.operated.by}` : 'not yet'}
            </dd>
          </div>
        </dl>
        {mayWrite && !round.ended && (
          <div className="mt-4 grid gap-2">
            {!round.operated && (
              <>
                <p>
                  {round.transmitter === null ? (
                    <>
                      When + to − of each string is read,{' '}
                      <strong className="font-semibold">{record.plan?.operator}</strong> operates {what}
                      {facts.initiator.place && ` (${facts.initiator.place})`} by hand. Wakeline switches
                      nothing; it only notes the time.
                    </>
                  ) : (
                    <>A person takes {what} off by hand. Wakeline switches nothing; it only notes the time.</>
                  )}
                </p>
                <Button
                  weight="primary"
                  className="min-h-[64px] w-full text-[17px]"
                  onClick={() => act({ kind: 'operated', round: index })}
                >
                  {what === facts.initiator.name ? 'Initiator' : what} {verb} now: note the time
                </Button>
              </>
            )}
            {round.operated && !round.released && (
              <>
                <Button className="w-full" onClick={() => act({ kind: 'released', round: index })}>
                  {round.transmitter === null ? 'Initiator released' : `${what} running`} again now: note the
                  time
                </Button>
                <button
                  type="button"
                  className="target justify-self-start text-sm text-petrol underline underline-offset-2"
                  onClick={() => act({ kind: 'operated_withdrawn', round: index })}
                >
                  Take the noted time back: it was not {verb} yet
                </button>
              </>
            )}
            {released && (
              <div className="border-t border-rule-faint pt-3">
                <p role="status">
                  {back.gone === 0
                    ? 'No unit told that it went, so none can tell that it came back.'
                    : `${back.back} of ${back.gone} units that went have come back${back.held > 0 ? `; ${back.held} are still in shutdown` : ''}.`}
                </p>
                <p className="mt-1 text-sm text-ink-2">
                  Give them a few reports. What does not come back is stuck: the verdict names it.
                </p>
                <Button
                  weight="primary"
                  className="mt-2 w-full sm:w-auto"
                  onClick={() => {
                    act({ kind: 'round_ended', round: index });
                    onEnded();
                  }}
                >
                  End this round
                </Button>
              </div>
            )}
          </div>
        )}
      </Sheet>
      <Sheet
        id="strings"
        title={originS === null ? 'Before the command' : 'Home runs at the inverter’s end'}
        aside={`${strings.length} strings`}
      >
        <StringRows
          strings={strings}
          timeLimitS={timeLimitS}
          sinceS={round.ended ? null : sinceS}
          released={released}
          mayWrite={mayWrite && !round.ended}
          onRead={(string, moment) => setReading({ string, moment })}
          onStrike={setStrike}
        />
      </Sheet>
      <Sheet id="lines" title="Voltage of each string" aside={`limits: ${verdict.limits.source}`} flush>
        <RoundDrawing facts={facts} strings={strings} round={round} seen={seen} limits={verdict.limits} />
      </Sheet>
      <Dialog
        open={reading !== null}
        title={reading ? `${reading.string.part.name}, home run at the inverter’s end` : ''}
        onClose={() => setReading(null)}
      >
        {reading && (
          <ReadingEntry
            string={reading.string}
            moment={reading.moment}
            round={index}
            timeLimitS={timeLimitS}
            clockS={clockS}
            onSave={(a) => {
              act(a);
              setReading(null);
            }}
            onClose={() => setReading(null)}
          />
        )}
      </Dialog>
      <Dialog open={strike !== null} title="Strike this reading" onClose={() => setStrike(null)}>
        <form
          onSubmit={(event) => {
            event.preventDefault();
            if (!strike || why.trim().length < 2) return;
            act({ kind: 'reading_struck', reading: strike.id, reason: why.trim() });
            setStrike(null);
            setWhy('');
          }}
        >
          <Field
            label="Why"
            hint="It stays on record, struck through."
            value={why}
            onChange={(e) => setWhy(e.target.value)}
          />
          <Button type="submit" weight="primary" className="mt-3" disabled={why.trim().length < 2}>
            Strike it
          </Button>
        </form>
      </Dialog>
    </div>
  );
}

function WatchState({ test: { page } }: { test: TestInHand }) {
  const { watch, facts } = page;
  return (
    <div className="mb-3">
      <Notice
        kind={watch.canWatch ? 'done' : 'failed'}
        title={watch.canWatch ? 'Watching' : 'Nothing can be watched now'}
      >
        {watch.words}
        {watch.newestAt && ` Newest report ${clockSeconds(watch.newestAt, facts.site.timeZone)}.`}
      </Notice>
    </div>
  );
}

function Clock({ sinceS, limitS, released }: { sinceS: number | null; limitS: number; released: boolean }) {
  if (released) return null;
  const over = sinceS !== null && sinceS > limitS;
  return (
    <div className="sticky top-0 z-10 flex items-end justify-between gap-3 border-b-[3px] border-ink bg-film pb-1">
      <p className="text-[48px] font-semibold leading-[52px] tracking-[-0.03em] tabular-nums" role="timer">
        {sinceS === null ? '–:––' : mmss(sinceS)}
      </p>
      <p className="pb-2 text-right text-ink-2">
        {sinceS === null ? (
          'since the command'
        ) : over ? (
          <strong className="font-semibold text-ink">past the {limitS} s</strong>
        ) : (
          `${Math.ceil(limitS - sinceS)} s left of ${limitS} s`
        )}
      </p>
    </div>
  );
}
