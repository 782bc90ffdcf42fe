import type { TestRecord } from '../../domain/commissioning/shutdown-test-record';
import type { ShutdownTestPage } from '../../schemas/api/shutdown-test';
import {
  liveStrings,
  operatedName,
  releasedAfterS,
  roundName,
  stringsConcerned,
  stringsOfRound,
  type LiveNow,
} from './round';
import { shutdownTestWords } from '../../words/shutdown-test';

export interface StepWords {
  heading: string;
  sentence: string;
}

/** The finding of a guided test at a step, and what to do next. */
export function stepWords(
  page: ShutdownTestPage,
  record: TestRecord,
  step: 'plan' | 'caution' | 'sign' | number,
): StepWords {
  const { facts, verdict } = page;
  const zone = facts.zone.name;
  if (page.state === 'ended')
    return {
      heading: shutdownTestWords.theTestOfWas(zone),
      sentence: shutdownTestWords.itCountsAsNo,
    };
  if (step === 'plan')
    return record.plan === null
      ? {
          heading: shutdownTestWords.testOfWhoIs(zone),
          sentence: page.follows
            ? shutdownTestWords.thisTestRepeatsWhat
            : shutdownTestWords.itShowsWhetherBrings(facts.initiator.name),
        }
      : {
          heading: shutdownTestWords.testOfOperates(zone, record.plan.operator, facts.initiator.name),
          sentence: shutdownTestWords.changeWhatIsWrong,
        };
  if (step === 'caution')
    return {
      heading: record.caution
        ? shutdownTestWords.theCautionWasAccepted(record.caution.name)
        : shutdownTestWords.readTheCautionBefore,
      sentence: shutdownTestWords.acceptedByNameAnd,
    };
  if (step === 'sign') {
    if (record.rounds.every((r) => r.watchStarted === null))
      return { heading: shutdownTestWords.noRoundHasBeen, sentence: shutdownTestWords.thereIsNoVerdict };
    return {
      heading: verdict.headline,
      sentence:
        verdict.result === 'failed'
          ? shutdownTestWords.signItAllThe
          : verdict.result === 'passed'
            ? shutdownTestWords.onlyTheInstrumentDecides
            : shutdownTestWords.itCanBeSigned,
    };
  }
  const round = record.rounds[step];
  const name = round ? roundName(facts, round.transmitter) : '';
  if (!round?.watchStarted)
    return {
      heading: shutdownTestWords.roundStepName(step, name),
      sentence: shutdownTestWords.startWatchingFirstThen,
    };
  if (round.ended)
    return {
      heading: shutdownTestWords.roundIsOver(step, name),
      sentence: shutdownTestWords.goOnWithThe,
    };
  const strings = stringsOfRound(
    facts,
    stringsConcerned(facts, record.plan?.strings ?? [], round.transmitter),
    round,
    page.evidence[step],
  );
  const releaseS = releasedAfterS(round, page.evidence[step]);
  const { live, unknown } = liveStrings(strings, verdict, step, releaseS);
  const released = round.released !== null || Boolean(page.evidence[step]?.release);
  if (released)
    return {
      heading: shutdownTestWords.releasedWatchComeBack(zone),
      sentence:
        live.length === 0
          ? shutdownTestWords.unitsThatDoNot
          : `${liveHeading(live, strings.length, true)}. ${shutdownTestWords.liveAgain}`,
    };
  if (live.length > 0)
    return {
      heading: liveHeading(live, strings.length),
      sentence: shutdownTestWords.treatAsLiveRelease(unknown.length, verdict.limits.afterS),
    };
  if (!round.operated && !page.evidence[step]?.command)
    return {
      heading: shutdownTestWords.watchingWaitingForPerson(zone, operatedName(facts, round.transmitter)),
      sentence: shutdownTestWords.readToOfEach,
    };
  return {
    heading: round.operated
      ? shutdownTestWords.wasOperatedReadThe(round.transmitter, facts.initiator.name, name)
      : shutdownTestWords.loggerReportsReadThe,
    sentence: shutdownTestWords.plusMinusAndEarth(verdict.limits.afterS),
  };
}

/** So many strings are named; of more only the number says that none is left out. */
const NAMED = 3;

function liveHeading(live: readonly LiveNow[], of: number, released = false): string {
  const names = live.length <= NAMED ? live.map((s) => s.name) : null;
  if (live.every((s) => s.failed)) return shutdownTestWords.didNotShutDown(names, live.length, of);
  if (released) return shutdownTestWords.didNotComeDown(names, live.length, of);
  const limits = new Set(live.map((s) => s.limitV));
  return live.every((s) => s.above)
    ? shutdownTestWords.stillAbove(names, live.length, of, limits.size === 1 ? live[0]!.limitV : null)
    : shutdownTestWords.notDown(names, live.length, of);
}
