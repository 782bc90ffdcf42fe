import { ago, duration } from '../drawings/times';
import { counted } from '../drawings/numbers';
import type { LoggersPage, LoggerTokenView, LoggerView } from '../schemas/api/loggers';

const inForce = (logger: LoggerView): number => logger.tokens.filter((t) => t.state !== 'ended').length;

/** What the page has to say: who does not speak first, then who can't, then what was refused. */
export function finding({ loggers }: LoggersPage, now: Date): { heading: string; sentence: string } {
  if (loggers.length === 0)
    return {
      heading: 'No logger is on the as-built yet',
      sentence: 'Add one there; it gets its token with it, and may then report here.',
    };
  const without = loggers.filter((l) => inForce(l) === 0);
  if (without.length > 0)
    return {
      heading:
        without.length === 1
          ? `Logger ${without[0]?.serial ?? ''} has no token in force`
          : `${without.length} of ${counted(loggers.length, 'logger')} have no token in force`,
      sentence: 'Without one a logger is refused. Make a token below and put it into the logger.',
    };
  const away = loggers.filter((l) => !l.connected);
  const first = away[0];
  if (first)
    return {
      heading:
        away.length === 1
          ? `Logger ${first.serial} is not connected`
          : `${away.length} of ${counted(loggers.length, 'logger')} are not connected`,
      sentence: `${first.lastSpokeAt ? `${first.serial} last spoke ${ago(first.lastSpokeAt, now)}` : `${first.serial} has never spoken`}. Look at its supply and its line first, then at what was refused below.`,
    };
  const refused = loggers.reduce((n, l) => n + l.refused, 0);
  return {
    heading:
      loggers.length === 1
        ? `Logger ${loggers[0]?.serial ?? ''} is connected`
        : `All ${loggers.length} loggers are connected`,
    sentence:
      refused === 0
        ? `Nothing that ${loggers.length === 1 ? 'it' : 'they'} sent was refused.`
        : `${counted(refused, 'message')} ${refused === 1 ? 'was' : 'were'} refused so far: what and why stands below.`,
  };
}

/** "in force", "ends in 23 h", "ended": with the shape that says the same. */
export function stateWords(
  token: LoggerTokenView,
  now: Date,
): { state: LoggerTokenView['state']; words: string; shape: string } {
  if (token.state === 'in_force') return { state: 'in_force', words: 'in force', shape: '●' };
  const leftS = token.endsAt ? (new Date(token.endsAt).getTime() - now.getTime()) / 1000 : 0;
  return token.state === 'ended' || leftS <= 0
    ? { state: 'ended', words: 'ended', shape: '×' }
    : { state: 'ending', words: `ends in ${duration(leftS)}`, shape: '◔' };
}

export const OVERLAP_WORDS: Record<number, string> = {
  0: 'at once',
  1: 'in an hour',
  24: 'in a day',
  72: 'in three days',
  168: 'in a week',
};
