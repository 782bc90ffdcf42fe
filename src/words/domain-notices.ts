import { listed } from '../drawings/numbers';
import { isOne } from './language';

/** What a notice says besides the line of its event. */
export const noticeSaid = {
  over: (headline: string) => `Over: ${headline}`,
  again: (headline: string) => `Again: ${headline}`,
  stayedAway: 'It has stayed away for half an hour.',
  stayedAwayNoProof:
    'It has stayed away for half an hour. That is no proof: isolate, lock out and prove dead before any work, as ever.',
  cantBeConfirmed: 'Until they report, a shutdown of these units can’t be confirmed: treat them as live.',
  /** @param logger its name; may be empty */
  loggerGone: (logger: string) =>
    logger === ''
      ? 'The logger has not reported for an hour'
      : `The logger ${logger} has not reported for an hour`,
  loggerGoneMeans:
    'Nothing of its strings is seen, a hazard neither: treat them as live. It keeps its readings and sends them later.',
  takenUpAgain: (title: string) => `Taken up again: ${title}`,
  hazardStands: 'It stands until the readings say otherwise.',
  papersAreWithTheSite: 'The papers are with the site.',
  somebodyLooks: (title: string) => `Somebody is looking into your report: ${title}`,
  noFaultFound: (title: string) => `Looked into, no fault found: ${title}`,
  done: (title: string) => `Looked into and done: ${title}`,
};

/** Where something is, and what to treat as live there. */
export const noticePlaces = {
  stringAt: (string: string, positions: readonly number[]) =>
    `${string} (position${isOne(positions.length) ? '' : 's'} ${listed(positions)})`,
  strings: (names: readonly string[]) => listed(names),
  manyStrings: (strings: number) => `${strings} strings`,
  live: (strings: string) =>
    `Treat as live: all of ${strings}, with the home run and everything up to the inverter.`,
  liveAll: 'Treat as live: every string of the site.',
};
