import { listed } from '../drawings/numbers';
import { counted } from './domain-counts';
import { isOne } from './language';

/** Why an act makes no sense as the test stands, with the remedy. */
export const actRefused = {
  noString: 'Choose at least one string.',
  noRound: 'Keep at least one round.',
  notPlanned: 'Say first who is there and what is tested.',
  cautionFirst: 'Read and accept the caution first.',
  noSuchReading: 'There is no such reading. Reload the page.',
  noSuchRound: 'There is no such round. Reload the page.',
  endRoundBefore: 'End the round before first.',
  watchFirst: 'Start watching first.',
  stringNotTested: 'This string is not part of the test.',
  sayHowLong: 'Say how long after the command it was read.',
  typeVoltage: 'Type at least one voltage.',
  roundOver: 'This round is over: add another one.',
  releasedAlready: 'It was released already: strike the readings instead.',
};

/** Why an instrument can't decide a test. */
export const instrumentSaid = {
  none: 'No instrument is named: readings do not decide without one.',
  noCategory:
    "The instrument is marked without a category: category III or IV is needed at the inverter's end.",
  category: (category: string) =>
    `The instrument is marked ${category}: category III or IV is needed at the inverter's end.`,
  rating: (ratedV: number, readV: string) => `The instrument is rated for ${ratedV} V; ${readV} V were read.`,
  notProvedBefore: 'The instrument was not proved on a known source before the test.',
  notProvedYet: 'The instrument has not been proved on a known source after the test yet.',
  provedFalse: 'The instrument failed when it was proved after the test: its readings decide nothing.',
};

/** What a fuller test would still need. */
export const testLacks = {
  takeOffAlone: (names: readonly string[]) =>
    `Take each transmitter off alone once: ${listed(names)} ${isOne(names.length) ? 'was' : 'were'} not shown so. A string that hears a neighbour's transmitter shows itself only then.`,
  readAtInverterEnd: (strings: readonly string[], timeLimitS: number) =>
    `Read + to −, + to earth and − to earth with a rated instrument at the inverter end of ${strings.length > 6 ? counted(strings.length, 'home run') : listed(strings)}: + to − before the command, all three within ${timeLimitS} s after it.`,
};

/** What a reader should know beside the results; rounds count from 1. */
export const testNotes = {
  reportedBeforeTap: (round: number, apartS: string) =>
    `Round ${round}: the logger reported the command ${apartS} s before the tap; their clocks or the tap are off.`,
  reportedAfterTap: (round: number, apartS: string) =>
    `Round ${round}: the logger reported the command ${apartS} s after the tap; their clocks or the tap are off.`,
  noCommandReported: (round: number) =>
    `Round ${round}: the logger reported no command; seconds count from the tap.`,
  othersShutDown: (round: number, strings: readonly string[]) =>
    `Round ${round}: ${listed(strings)} shut down too, though not drawn as hearing this transmitter.`,
  calibrationOld: (on: string) =>
    `The instrument was calibrated on ${on}, more than a year before: see whether its certificate still holds.`,
  notBack: (string: string, volts: string, afterS: string) =>
    `${string} has not come back: its input stood at ${volts} V ${afterS} s after the release.`,
};

/** What the verdict adds to the words of a round. */
export const verdictSaid = {
  onlyItsOwnOff: (words: string) =>
    `${words} Only its own transmitter was off: the signal of another one reaches it, or it holds.`,
  notByInitiator: (string: string) => `${string} was not tested by the initiator.`,
  notShownAlone: (words: string, transmitters: readonly string[]) =>
    `${words} ${listed(transmitters)} ${isOne(transmitters.length) ? 'was' : 'were'} not shown to shut it down alone.`,
  keptPassing: (positions: readonly number[]) =>
    `${counted(positions.length, 'unit')} kept passing: position ${listed(positions)}`,
  didNotComeBack: (string: string, positions: readonly number[]) =>
    `${counted(positions.length, 'unit')} of ${string} did not come back after the release: position ${listed(positions)}`,
};
