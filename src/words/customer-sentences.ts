import { counted, energy, number, percent, power } from '../drawings/numbers';
import { clockOrDate } from '../drawings/times';
import type { CustomerSite } from '../schemas/api/customer';
import type { SharedNow } from '../schemas/api/share';

/**
 * Sentences for the owner of a roof, who is not of the trade. Each is built from what is known and says nothing
 * beyond it; the gravest comes first.
 */
export interface CustomerWords {
  heading: string;
  sentences: string[];
  /** Shown wherever somebody might act on the page; null: no more than the standing note on the switch. */
  caution: { strong: string; rest: string } | null;
  /** Nothing here needs anybody. */
  calm: boolean;
}
/** Whom the sentences speak to: the owner of the roof, or whoever passes a shared page. */
export type Reader = 'owner' | 'anybody';
type Today = Pick<CustomerSite['today'], 'energy' | 'clearEnergyUntilNow'>;

/** Below this share of a clear day's energy so far there is no fair comparison yet, Wh. */
const COMPARE_FROM_WH = 500;
/** W: less counts as nothing. */
const NOTHING_BELOW_W = 20;

const LIVE_IN_LIGHT =
  'In light, every module and the cables right at it stay live. Leave the roof to qualified people, and tell a fire crew so.';

const is = (n: number): string => (n === 1 ? 'is' : 'are');
const has = (n: number): string => (n === 1 ? 'has' : 'have');

export const isStale = (now: SharedNow): boolean => now.loggers === 0 || now.quietLoggers >= now.loggers;

/** The newest word from the roof: what the page says is as of then, whenever it was read. */
export const heardAt = (now: SharedNow): string => now.lastSpokeAt ?? now.at;

function refusesToShutDown(now: SharedNow): string {
  if (now.notShuttingDown > 0)
    return `${number(now.notShuttingDown)} of ${counted(now.modules, 'module')} ${has(now.notShuttingDown)} not shut down`;
  return 'part of it has not shut down';
}

/** What is known of the modules one by one, for a roof that works. Of those that are silent nothing is claimed. */
function modulesWords(now: SharedNow): string {
  if (now.reporting === 0) return '';
  const heard = now.reporting - now.silent - now.unheard;
  if (heard <= 0) return 'Its modules do not report just now.';
  const which = heard < now.reporting ? ' heard from' : heard < now.modules ? ' that report' : '';
  if (now.passing < heard)
    return `${number(now.passing)} of ${counted(heard, 'module')}${which} ${is(now.passing)} passing power.`;
  return heard === 1
    ? `The one module${which} is passing power.`
    : `All ${number(heard)} modules${which} are passing power.`;
}

const roofOf = (reader: Reader): string => (reader === 'owner' ? 'your roof' : 'this roof');
const RoofOf = (reader: Reader): string => (reader === 'owner' ? 'Your roof' : 'This roof');

function outputWords(now: SharedNow, timeZone: string, reader: Reader): string {
  if (now.power === null && now.madeLast) {
    const { power: watts, at } = now.madeLast;
    const made = watts < NOTHING_BELOW_W ? 'made no power' : `made ${power(watts)}`;
    return `${RoofOf(reader)} ${made} at ${clockOrDate(at, now.at, timeZone)}; no reading of its power has come since.`;
  }
  if (now.power === null) return `What ${roofOf(reader)} is making is not known just now.`;
  if (now.power < NOTHING_BELOW_W) return `${RoofOf(reader)} is making no power just now.`;
  return `${RoofOf(reader)} is making ${power(now.power)}.`;
}

function shutdownCause(now: SharedNow): string {
  const causes = new Set(now.commands.map((c) => c.inForce));
  if (causes.has('initiator')) return 'A shutdown switch was operated.';
  if (causes.has('power_lost')) return 'The power that it needs to be released was lost.';
  return 'The signal that lets it work was lost.';
}

function heading(now: SharedNow, timeZone: string, reader: Reader): string {
  const roof = roofOf(reader);
  const Roof = RoofOf(reader);
  const when = (at: string) => clockOrDate(at, now.at, timeZone);
  if (now.notShuttingDown > 0 || now.stringsNotShuttingDown > 0)
    return `Treat ${roof} as live: ${refusesToShutDown(now)}.`;
  if (isStale(now))
    return now.lastSpokeAt
      ? `We have heard nothing from ${roof} since ${when(now.lastSpokeAt)}.`
      : `No readings have come from ${roof} yet.`;
  if (now.stage === 'commissioning') {
    const answered = now.reporting - now.unheard;
    return now.reporting > 0
      ? `${Roof} is being put into service: ${number(answered)} of ${counted(now.reporting, 'module')} ${has(answered)} answered so far.`
      : `${Roof} is being put into service.`;
  }
  if (now.inShutdownSince) return `${Roof} has been shut down since ${when(now.inShutdownSince)}.`;
  const { total, gridLost } = now.inverters;
  if (total > 0 && gridLost === total) return `The grid is gone at ${roof}, so it makes no power.`;
  if (now.commands.length > 0) {
    const since = now.commands.map((c) => c.since).sort()[0] ?? now.at;
    return `${outputWords(now, timeZone, reader)} Part of it has been shut down since ${when(since)}.`;
  }
  if (!now.daylight) return `It is night at ${roof}: it rests until the sun is up.`;
  if (now.reporting > 0 && now.dark === now.reporting)
    return `Too little light reaches ${reader === 'owner' ? 'your' : 'the'} modules: ${roof} is waiting.`;
  return `${outputWords(now, timeZone, reader)} ${modulesWords(now)}`.trim();
}

/** What stands out beside the heading, most serious first. */
function exceptions(now: SharedNow, reader: Reader): string[] {
  const said: string[] = [];
  const held = now.inShutdownSince !== null || now.commands.length > 0;
  if (now.unconfirmed > 0 && held)
    said.push(
      `Of ${counted(now.unconfirmed, 'module')} nothing shows yet that ${now.unconfirmed === 1 ? 'it' : 'they'} followed: treat ${now.unconfirmed === 1 ? 'it' : 'them'} as live.`,
    );
  if (now.stuck > 0)
    said.push(
      `${counted(now.stuck, 'module')} ${now.stuck === 1 ? 'holds back its' : 'hold back their'} power though nothing asks for it.`,
    );
  const starting = now.shutdown - now.stuck;
  if (starting > 0 && !held && now.stage === 'operating' && now.daylight)
    said.push(`${counted(starting, 'module')} ${is(starting)} not passing power yet.`);
  if (now.silent > 0)
    said.push(
      `${counted(now.silent, 'module')} ${has(now.silent)} not reported for a while; ${now.silent === 1 ? 'it' : 'they'} may still be working.`,
    );
  if (now.unheard > 0 && now.stage === 'operating')
    said.push(`${counted(now.unheard, 'module')} ${has(now.unheard)} never reported.`);
  if (now.dark > 0 && now.daylight)
    said.push(
      now.dark === now.reporting
        ? 'Snow or a very dull sky does that; it is no fault.'
        : `${counted(now.dark, 'module')} ${now.dark === 1 ? 'gets' : 'get'} too little light to work: snow, leaves or deep shade.`,
    );
  const { total, gridLost, fault, limited } = now.inverters;
  const inverters = counted(total, 'inverter');
  if (fault > 0) said.push(`${number(fault)} of ${inverters} ${fault === 1 ? 'reports' : 'report'} a fault.`);
  if (gridLost > 0 && total > 0)
    said.push(
      gridLost === total
        ? 'Inverters stop by themselves when the grid goes, and start again some minutes after it is back.'
        : `${number(gridLost)} of ${inverters} ${is(gridLost)} without the grid.`,
    );
  if (limited > 0 && now.daylight)
    said.push(
      `${number(limited)} of ${inverters} ${is(limited)} held below what the sun would allow, by a limit or by heat.`,
    );
  if (now.quietLoggers > 0 && !isStale(now))
    said.push(
      `Part of ${roofOf(reader)} has not reported for a while; these figures leave it out or show its last word.`,
    );
  return said;
}

function todayWords(now: SharedNow, today: Today): string {
  if (today.energy === null) return '';
  const made = now.daylight
    ? `Today so far ${energy(today.energy)}`
    : `Today it made ${energy(today.energy)}`;
  if (today.clearEnergyUntilNow < COMPARE_FROM_WH) return `${made}.`;
  return `${made}, ${percent(today.energy / today.clearEnergyUntilNow)} of what a clear day ${now.daylight ? 'would have given by now' : 'gives'}.`;
}

/** Whether anything but a quiet working or resting roof is there to tell. */
function isCalm(now: SharedNow): boolean {
  const troubled =
    now.stuck +
    now.silent +
    now.notShuttingDown +
    now.stringsNotShuttingDown +
    now.unconfirmed +
    now.quietLoggers;
  return (
    now.stage === 'operating' &&
    !isStale(now) &&
    troubled === 0 &&
    now.unheard === 0 &&
    now.commands.length === 0 &&
    now.inShutdownSince === null &&
    now.inverters.fault === 0 &&
    now.inverters.gridLost === 0 &&
    (!now.daylight || now.power !== null)
  );
}

function cautionOf(now: SharedNow): CustomerWords['caution'] {
  if (now.notShuttingDown > 0 || now.stringsNotShuttingDown > 0)
    return {
      strong: 'Do not rely on the shutdown.',
      rest: `Keep people off the roof and away from its cables. ${LIVE_IN_LIGHT}`,
    };
  if (now.stage === 'commissioning')
    return {
      strong: 'Until the work is finished, treat everything on the roof as live.',
      rest: 'Modules that have not answered do not obey the shutdown switch.',
    };
  if (now.commands.length > 0 || now.inShutdownSince)
    return { strong: 'Shut down does not mean without voltage.', rest: LIVE_IN_LIGHT };
  return null;
}

/** The head of the page: heading, sentences, caution. Who merely passes is neither called upon nor told to call. */
export function customerWords(
  now: SharedNow,
  today: Today,
  timeZone: string,
  care: { organisation: string },
  reader: Reader = 'owner',
): CustomerWords {
  const calm = isCalm(now);
  const grave = now.notShuttingDown > 0 || now.stringsNotShuttingDown > 0;
  const sentences: string[] = [];
  if (grave && reader === 'owner')
    sentences.push(`Call ${care.organisation} now if they have not called you.`);
  if (isStale(now)) {
    sentences.push(
      now.lastSpokeAt
        ? 'This page cannot tell what it is doing: the connection to it is missing, and it may well be working.'
        : 'This page cannot tell what it is doing until the connection to it is made.',
    );
    if (now.commands.length > 0) sentences.push('When last heard, it was shut down, wholly or in part.');
    return { heading: heading(now, timeZone, reader), sentences, caution: cautionOf(now), calm: false };
  }
  if (now.inShutdownSince || now.commands.length > 0) sentences.push(shutdownCause(now));
  sentences.push(...exceptions(now, reader));
  if (now.stage === 'operating' && !grave) {
    const madeToday = todayWords(now, today);
    if (madeToday) sentences.unshift(madeToday);
  }
  if (calm) {
    if (reader === 'owner') sentences.push('Nothing needs your attention.');
  } else if (!grave && now.stage === 'operating')
    sentences.push(
      reader === 'owner'
        ? `${care.organisation} has this on its screens; there is nothing for you to do on the roof.`
        : `${care.organisation} has this on its screens.`,
    );
  return { heading: heading(now, timeZone, reader), sentences, caution: cautionOf(now), calm };
}
