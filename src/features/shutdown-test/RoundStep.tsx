import { useCallback, useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Dialog } from '../../components/ui/Dialog';
import { Field } from '../../components/ui/Field';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { useNow } from '../../components/ui/Time';
import type { TestReading } from '../../domain/commissioning/shutdown-test-record';
import { clockSeconds } from '../../drawings/times';
import { ReadingEntry } from './ReadingEntry';
import { RoundDrawing } from './RoundDrawing';
import { StringRows } from './StringRows';
import {
  commandedAtS,
  returnOf,
  operatedName,
  roundName,
  stringsConcerned,
  stringsOfRound,
  tapsOpen,
  type StringNow,
} from './round';
import type { TestInHand } from './use-test';
import { roundStep } from '../../words/shutdown-test';

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
  const taps = tapsOpen(round, seen, now / 1000);
  const what = operatedName(facts, round.transmitter);
  const verb = round.transmitter === null ? roundStep.operated : roundStep.takenOff;
  const back = returnOf(seen);
  if (round.watchStarted === null)
    return (
      <Sheet
        id="round"
        title={roundStep.roundOf(index, record.rounds.length, roundName(facts, round.transmitter))}
      >
        <WatchState test={test} />
        {round.transmitter !== null && (
          <p className="mb-3">
            {roundStep.personIsolatesTheSupply(what, strings.map((s) => s.part.name).join(', '))}
          </p>
        )}
        {watch.inForce.length > 0 && (
          <div className="mb-3">
            <Notice
              kind="stale"
              title={roundStep.shutdownIsInForce(watch.inForce.map((c) => c.where).join(', '))}
            >
              {roundStep.sinceReleaseItAnd(watch.inForce[0]!.since, zone)}
            </Notice>
          </div>
        )}
        {mayWrite && (
          <Button
            weight="primary"
            className="w-full sm:w-auto"
            onClick={() => act({ kind: 'watch_started', round: index })}
          >
            {roundStep.startWatching}
          </Button>
        )}
      </Sheet>
    );
  return (
    <div className="grid gap-5">
      <Clock sinceS={sinceS} limitS={timeLimitS} released={released} />
      <Sheet
        id="round"
        title={roundStep.roundOf(index, record.rounds.length, roundName(facts, round.transmitter))}
        aside={roundStep.watchedSince(round.watchStarted.at, zone)}
      >
        <WatchState test={test} />
        <dl className="mt-1 text-sm text-ink-2">
          <div className="flex flex-wrap gap-x-2">
            <dt>{roundStep.commandByTheLoggers}</dt>
            <dd>
              {seen?.command
                ? `${clockSeconds(seen.command.since, zone)}, ${seen.command.where}`
                : roundStep.noneYet}
              {seen?.command &&
                !round.ended &&
                !released &&
                roundStep.mmssAgo(mmss(Math.max(0, now / 1000 - Date.parse(seen.command.since) / 1000)))}
            </dd>
          </div>
          <div className="flex flex-wrap gap-x-2">
            <dt>{roundStep.asAPersonNoted}</dt>
            <dd>
              {round.operated
                ? `${clockSeconds(round.operated.at, zone)}, ${round.operated.by}`
                : roundStep.notYet}
            </dd>
          </div>
        </dl>
        {mayWrite && !round.ended && (
          <div className="mt-4 grid gap-2">
            {taps.operated && (
              <>
                <p>
                  {round.transmitter === null ? (
                    <>
                      {roundStep.whenToOfEach}
                      <strong className="font-semibold">{record.plan?.operator}</strong>
                      {roundStep.operatesWhatPlace(what, facts.initiator.place)}
                    </>
                  ) : (
                    <>{roundStep.personTakesOffBy(what)}</>
                  )}
                </p>
                <Button
                  weight="primary"
                  className="min-h-[64px] w-full text-[17px]"
                  onClick={() => act({ kind: 'operated', round: index })}
                >
                  {roundStep.nowNoteTheTime(what, facts.initiator.name, verb)}
                </Button>
              </>
            )}
            {taps.released && (
              <>
                <p>
                  <strong className="font-semibold">{roundStep.beforeARelease}</strong>
                </p>
                <Button className="w-full" onClick={() => act({ kind: 'released', round: index })}>
                  {roundStep.transmitterNullInitiatorReleased(round.transmitter, what)}
                </Button>
              </>
            )}
            {round.operated && !round.released && (
              <button
                type="button"
                className="target justify-self-start text-sm text-petrol underline underline-offset-2"
                onClick={() => act({ kind: 'operated_withdrawn', round: index })}
              >
                {roundStep.takeTheNotedTime(verb)}
              </button>
            )}
            {released && (
              <div className="border-t border-rule-faint pt-3">
                <p role="status">
                  {back.gone === 0
                    ? roundStep.noUnitToldThat
                    : roundStep.backOfGoneUnits(back.back, back.gone, back.held)}
                </p>
                <p className="mt-1 text-sm text-ink-2">{roundStep.giveThemAFew}</p>
                <Button
                  weight="primary"
                  className="mt-2 w-full sm:w-auto"
                  onClick={() => {
                    act({ kind: 'round_ended', round: index });
                    onEnded();
                  }}
                >
                  {roundStep.endThisRound}
                </Button>
              </div>
            )}
          </div>
        )}
      </Sheet>
      <Sheet
        id="strings"
        title={originS === null ? roundStep.beforeTheCommand : roundStep.homeRunsAtThe}
        aside={roundStep.strings(strings.length)}
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
      <Sheet
        id="lines"
        title={roundStep.voltageOfEachString}
        aside={roundStep.limitsSource(verdict.limits.source)}
        flush
      >
        <RoundDrawing facts={facts} strings={strings} round={round} seen={seen} limits={verdict.limits} />
      </Sheet>
      <Dialog
        open={reading !== null}
        title={reading ? roundStep.homeRunAtThe(reading.string.part.name) : ''}
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
      <Dialog open={strike !== null} title={roundStep.strikeThisReading} onClose={() => setStrike(null)}>
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
            label={roundStep.why}
            hint={roundStep.itStaysOnRecord}
            value={why}
            onChange={(e) => setWhy(e.target.value)}
          />
          <Button type="submit" weight="primary" className="mt-3" disabled={why.trim().length < 2}>
            {roundStep.strikeIt}
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
        title={watch.canWatch ? roundStep.watching : roundStep.nothingCanBeWatched}
      >
        {watch.words}
        {watch.newestAt && roundStep.newestReport(watch.newestAt, facts.site.timeZone)}
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
          roundStep.sinceTheCommand
        ) : over ? (
          <strong className="font-semibold text-ink">{roundStep.pastThe(limitS)}</strong>
        ) : (
          roundStep.leftOf(Math.ceil(limitS - sinceS), limitS)
        )}
      </p>
    </div>
  );
}
