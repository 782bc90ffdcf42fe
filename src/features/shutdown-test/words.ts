import { openRound, type TestRecord } from '../../domain/commissioning/shutdown-test-record';
import type { ShutdownTestPage } from '../../schemas/api/shutdown-test';
import { roundName } from './round';

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
      heading: `The test of ${zone} was ended without a signature`,
      sentence: 'It counts as no test. What was written stays readable.',
    };
  if (step === 'plan')
    return record.plan === null
      ? {
          heading: `Test of ${zone}: who is there, and what with?`,
          sentence: page.follows
            ? 'This test repeats what the one before left open; people, instrument and strings are taken from it.'
            : `It shows whether ${facts.initiator.name} brings the home runs down in time.`,
        }
      : {
          heading: `Test of ${zone}: ${record.plan.operator} operates ${facts.initiator.name}`,
          sentence: 'Change what is wrong; rounds that have begun stay.',
        };
  if (step === 'caution')
    return {
      heading: record.caution
        ? `The caution was accepted by ${record.caution.name}`
        : 'Read the caution before anybody measures',
      sentence: 'Accepted by name and time; it stays with the test.',
    };
  if (step === 'sign') {
    if (record.rounds.every((r) => r.watchStarted === null))
      return { heading: 'No round has been watched yet', sentence: 'There is no verdict to sign.' };
    return {
      heading: verdict.headline,
      sentence:
        verdict.result === 'failed'
          ? 'Sign it all the same: a failed test is a record. Then find the cause and repeat the test for what failed.'
          : verdict.result === 'passed'
            ? 'Only the instrument decides; reports of units stand beside it.'
            : 'It can be signed as it is; what is missing is listed below.',
    };
  }
  const round = record.rounds[step];
  const name = round ? roundName(facts, round.transmitter) : '';
  if (!round?.watchStarted)
    return {
      heading: `Round ${step + 1}: ${name}`,
      sentence: 'Start watching first; then a person operates it by hand.',
    };
  if (round.ended)
    return {
      heading: `Round ${step + 1} is over: ${name}`,
      sentence: 'Go on with the next round, repeat this one, or look at the verdict.',
    };
  const live = verdict.treatAsLive.map((s) => s.name);
  if (live.length > 0 && openRound(record) === step)
    return {
      heading: `${live.join(', ')} did not shut down`,
      sentence: 'Treat as live. Release, end the round, and find the cause before anybody works there.',
    };
  if (!round.operated)
    return {
      heading: `Watching ${zone}: waiting for a person to operate ${round.transmitter === null ? facts.initiator.name : name.replace(' off alone', '')}`,
      sentence: 'Read + to − of each home run first: only a string that was live can be shown dead.',
    };
  if (!round.released)
    return {
      heading: `${round.transmitter === null ? facts.initiator.name : name} was operated: read the home runs`,
      sentence: `+ to −, + to earth and − to earth at the inverter’s end, within ${verdict.limits.afterS} s.`,
    };
  return {
    heading: `Released: watch ${zone} come back`,
    sentence: 'Units that do not come back are stuck; the verdict names them.',
  };
}
