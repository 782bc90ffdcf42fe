import { listed } from '../../drawings/numbers';
import type { RollCallRun } from '../../schemas/api/roll-call';
import type { CommandNow } from '../../schemas/api/now';
import type { Deaf } from './listening';
import type { RollTally, UnknownUnit } from './tally';
import { commissioningWords } from '../../words/commissioning';

/** The sentences of the roll call. Every one must be true in its state: they are read by people on roofs. */

/** What the forecast says of those still to hear. */
export interface Outlook {
  /** How many of the missing are expected, and by when (ISO 8601); null: nothing can be said yet. */
  expected: number;
  by: string | null;
  /** Groups without a single answer, left out of the forecast. */
  notStirred: { kind: 'string' | 'gateway' | 'serials'; group: string; units: number }[];
}

export interface RollCallWords {
  heading: string;
  /** First part, set in strong. */
  strong: string;
  rest: string;
}

const have = (n: number): string => (n === 1 ? 'has' : 'have');

export function rollCallHeading(roster: number, heard: number): string {
  if (roster === 0) return commissioningWords.noUnitHereCan;
  if (heard === 0) return commissioningWords.noneOfAnsweredThe(roster, have(1));
  if (heard === roster)
    return roster === 1 ? commissioningWords.theOnlyUnitHas : commissioningWords.allUnitsHaveAnswered(roster);
  return commissioningWords.ofAnsweredTheRoll(heard, roster, have(heard));
}

/** "B4's 14 have not stirred: look at its gateway, its serials, or snow." */
function notStirred(groups: Outlook['notStirred']): string {
  const strings = groups.filter((g) => g.kind !== 'serials');
  const [first] = strings;
  const said: string[] = [];
  if (first) {
    const who =
      strings.length <= 3
        ? listed(strings.map((g) => `${g.group}’s ${g.units}`))
        : commissioningWords.unitsOfStrings(
            strings.reduce((n, g) => n + g.units, 0),
            strings.length,
          );
    const its =
      strings.length === 1
        ? commissioningWords.itsGatewayItsSerials
        : commissioningWords.theirGatewayTheirSerials;
    said.push(commissioningWords.haveNotStirredLook(who, its));
  }
  for (const g of groups.filter((other) => other.kind === 'serials'))
    said.push(commissioningWords.noneOfTheUnits(g.units, g.group.replace(/\.\.$/, '…')));
  return said.join(' ');
}

function expected(
  outlook: Outlook | null,
  timeZone: string,
  missing: number,
): Pick<RollCallWords, 'strong' | 'rest'> {
  const rest = notStirred(outlook?.notStirred ?? []);
  if (!outlook)
    return { strong: commissioningWords.theLoggersAreListening, rest: commissioningWords.tooFewAnswersSo };
  if (outlook.expected === 0)
    return {
      strong: commissioningWords.noFurtherAnswersAre,
      rest: rest || commissioningWords.notAnsweredWalkTo(missing, have(missing)),
    };
  const when = outlook.by ? commissioningWords.by(outlook.by, timeZone) : '';
  const who =
    outlook.expected >= missing
      ? missing === 1
        ? commissioningWords.theOneMissingIs
        : commissioningWords.allMissingAreExpected(missing)
      : commissioningWords.ofTheMissingExpected(outlook.expected, missing);
  return { strong: `${who}${when}.`, rest };
}

/** Nothing is expected, and nobody sent to a unit, of which nobody can tell. */
function running(
  tally: RollTally,
  outlook: Outlook | null,
  timeZone: string,
  deaf: Deaf | 'page' | null,
): Pick<RollCallWords, 'strong' | 'rest'> {
  const words = commissioningWords;
  const missing = tally.missing.length;
  if (deaf === 'page') return { strong: words.thisPageIsNot, rest: words.nobodyCanTell };
  if (!deaf?.missing) return expected(outlook, timeZone, missing);
  const { all, since, loggers, who } = deaf;
  if (all) return { strong: words.nothingListens(since, loggers, who, timeZone), rest: words.nobodyCanTell };
  const said = outlook && deaf.missing < missing && expected(outlook, timeZone, missing - deaf.missing);
  return {
    strong: words.notHeardSince(since, loggers, who, deaf.missing, timeZone),
    rest: `${said ? `${said.strong} ${said.rest} ` : ''}${words.treatEveryString}`,
  };
}

/** Heading and sentence for every state of a roll call. */
export function rollCallWords(
  tally: RollTally,
  run: RollCallRun | null,
  outlook: Outlook | null,
  timeZone: string,
  deaf: Deaf | 'page' | null = null,
): RollCallWords {
  const heading = rollCallHeading(tally.roster, tally.heard);
  const missing = tally.missing.length;
  if (tally.roster === 0)
    return {
      heading,
      strong: '',
      rest:
        tally.mute > 0
          ? commissioningWords.accordingToTheType(tally.mute)
          : commissioningWords.theAsBuiltHolds,
    };
  if (missing === 0)
    return run && !run.stoppedAt
      ? {
          heading,
          strong: commissioningWords.nobodyIsMissing,
          rest: commissioningWords.stopTheRollCall,
        }
      : { heading, strong: commissioningWords.nobodyIsMissing, rest: '' };
  if (!run)
    return {
      heading,
      strong: commissioningWords.theRollCallHas,
      rest: commissioningWords.somebodyOnSiteStarts,
    };
  if (run.stoppedAt)
    return {
      heading,
      strong: commissioningWords.itWasStoppedAt(run.stoppedAt, timeZone, run.stoppedBy),
      rest: commissioningWords.notAnsweredStartIt(missing, have(missing)),
    };
  return { heading, ...running(tally, outlook, timeZone, deaf) };
}

const FOLLOWS: Record<CommandNow['inForce'], string> = {
  initiator: commissioningWords.shutdownByTheInitiator,
  keep_alive_lost: commissioningWords.shutdownBecauseTheKeep,
  power_lost: commissioningWords.shutdownBecausePowerIs,
  released: 'released',
};

/** What a unit begins to follow once it is heard, said before somebody starts a roll call. */
export function commandInForceWords(commands: readonly CommandNow[]): string {
  const held = commands.filter((c) => c.inForce !== 'released');
  if (held.length === 0) return commissioningWords.inForceNowReleased;
  const parts = held.map((c) => `${c.where}: ${FOLLOWS[c.inForce]}`);
  return commissioningWords.inForceNowUnit(parts.join('; '));
}

/** "by gateway 2, like B1, which lacks 3" */
export function nearWords(unknown: UnknownUnit): string {
  const [first, second] = unknown.near;
  const by = commissioningWords.heardBy(unknown.answer.gateway);
  if (!first) return by;
  const lacks = (s: { name: string; missing: number }) => commissioningWords.whichLacks(s.name, s.missing);
  return second
    ? commissioningWords.asAreAnd(by, lacks(first), lacks(second))
    : commissioningWords.asIs(by, lacks(first));
}
