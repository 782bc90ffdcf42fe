import { clock } from '../../drawings/times';
import { counted, listed, number } from '../../drawings/numbers';
import type { RollCallRun } from '../../schemas/api/roll-call';
import type { CommandNow } from '../../schemas/api/now';
import type { RollTally, UnknownUnit } from './tally';

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
  if (roster === 0) return 'No unit here can answer a roll call';
  if (heard === 0) return `None of ${counted(roster, 'unit')} ${have(1)} answered the roll call`;
  if (heard === roster)
    return roster === 1
      ? 'The only unit has answered the roll call'
      : `All ${number(roster)} units have answered the roll call`;
  return `${number(heard)} of ${counted(roster, 'unit')} ${have(heard)} answered the roll call`;
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
        : `${number(strings.reduce((n, g) => n + g.units, 0))} units of ${strings.length} strings`;
    const its = strings.length === 1 ? 'its gateway, its serials' : 'their gateway, their serials';
    said.push(`${who} have not stirred: look at ${its}, or snow.`);
  }
  for (const g of groups.filter((other) => other.kind === 'serials'))
    said.push(
      `None of the ${g.units} units with serials ${g.group.replace(/\.\.$/, '…')} has stirred: compare their labels.`,
    );
  return said.join(' ');
}

function running(
  tally: RollTally,
  outlook: Outlook | null,
  timeZone: string,
): Pick<RollCallWords, 'strong' | 'rest'> {
  const missing = tally.missing.length;
  const rest = notStirred(outlook?.notStirred ?? []);
  if (!outlook)
    return { strong: 'The loggers are listening.', rest: 'Too few answers so far to say how long it takes.' };
  if (outlook.expected === 0)
    return {
      strong: 'No further answers are expected soon.',
      rest:
        rest ||
        `${counted(missing, 'unit')} ${have(missing)} not answered: walk to ${missing === 1 ? 'it' : 'them'}, and compare the label.`,
    };
  const when = outlook.by ? ` by ${clock(outlook.by, timeZone)}` : '';
  const who =
    outlook.expected >= missing
      ? missing === 1
        ? 'The one missing is expected'
        : `All ${number(missing)} missing are expected`
      : `${number(outlook.expected)} of the ${number(missing)} missing ${outlook.expected === 1 ? 'is' : 'are'} expected`;
  return { strong: `${who}${when}.`, rest };
}

/** Heading and sentence for every state of a roll call. */
export function rollCallWords(
  tally: RollTally,
  run: RollCallRun | null,
  outlook: Outlook | null,
  timeZone: string,
): RollCallWords {
  const heading = rollCallHeading(tally.roster, tally.heard);
  const missing = tally.missing.length;
  if (tally.roster === 0)
    return {
      heading,
      strong: '',
      rest:
        tally.mute > 0
          ? `According to the type entered, its ${counted(tally.mute, 'unit')} ${tally.mute === 1 ? 'reports' : 'report'} nothing: only a meter or the inverter’s input shows what ${tally.mute === 1 ? 'it does' : 'they do'}.`
          : 'The as-built holds no units yet.',
    };
  if (missing === 0)
    return run && !run.stoppedAt
      ? {
          heading,
          strong: 'Nobody is missing.',
          rest: 'Stop the roll call: the loggers are still listening for serials.',
        }
      : { heading, strong: 'Nobody is missing.', rest: '' };
  if (!run)
    return {
      heading,
      strong: 'The roll call has not been started.',
      rest: 'Somebody on site starts it.',
    };
  if (run.stoppedAt)
    return {
      heading,
      strong: `It was stopped at ${clock(run.stoppedAt, timeZone)}${run.stoppedBy ? ` by ${run.stoppedBy}` : ''}.`,
      rest: `${counted(missing, 'unit')} ${have(missing)} not answered; start it again when somebody is on site.`,
    };
  return { heading, ...running(tally, outlook, timeZone) };
}

const FOLLOWS: Record<CommandNow['inForce'], string> = {
  initiator: 'shutdown by the initiator',
  keep_alive_lost: 'shutdown, because the keep-alive is lost',
  power_lost: 'shutdown, because power is lost',
  released: 'released',
};

/** What a unit begins to follow once it is heard, said before somebody starts a roll call. */
export function commandInForceWords(commands: readonly CommandNow[]): string {
  const held = commands.filter((c) => c.inForce !== 'released');
  if (held.length === 0)
    return 'In force now: released. A unit that is heard goes on passing power, and from then on obeys the initiator.';
  const parts = held.map((c) => `${c.where}: ${FOLLOWS[c.inForce]}`);
  return `In force now: ${parts.join('; ')}. A unit that is heard there goes into shutdown.`;
}

/** "by gateway 2, like B1, which lacks 3" */
export function nearWords(unknown: UnknownUnit): string {
  const [first, second] = unknown.near;
  const by = `heard by ${unknown.answer.gateway}`;
  if (!first) return by;
  const lacks = (s: { name: string; missing: number }) => `${s.name}, which lacks ${s.missing}`;
  return second ? `${by}, as are ${lacks(first)}, and ${lacks(second)}` : `${by}, as is ${lacks(first)}`;
}
