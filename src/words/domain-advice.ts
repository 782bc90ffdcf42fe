import type { CauseKind } from '../domain/causes/kinds';
import type { CauseAdvice } from '../domain/notices/advice';

/** What to do about a cause today, and what to tell whoever goes up the ladder. */

/** By the part that is shared, before anything else. */
export const adviceByPart: Partial<Record<string, string>> = {
  transmitter: 'Look at the transmitter before anybody goes up: its supply, its output, its fuse.',
  gateway: 'Look at the gateway before anybody goes up: its supply, its antenna, what stands in the way.',
  logger: 'Look at the logger before anybody goes up: its supply and its way to the network.',
  input: 'Begin at the inverter’s input, not on the roof.',
  inverter: 'Begin at the inverter, not on the roof.',
};

export const adviceByKind: Record<CauseKind, CauseAdvice> = {
  not_shutting_down: {
    today: 'Call the site now and keep everybody off these strings.',
    ladder: 'Nobody goes up until a licensed person has isolated these strings and proved them dead.',
  },
  stuck: {
    today: 'Find what keeps these units in shutdown; they make nothing until then.',
    ladder: 'Bring spare units of the same type and a rated meter.',
  },
  unconfirmed: {
    today:
      'Find out why nothing shows that these units followed. Until then a shutdown of them proves nothing.',
    ladder: 'Treat these strings as live: nothing shows that they followed the command.',
  },
  silent: {
    today: 'Find out why nothing is heard. Until then a shutdown of these units can’t be confirmed.',
    ladder: 'Treat these units as live: what they do is not known.',
  },
  low_output: {
    today: 'Look at the string’s page, then decide whether somebody has to go.',
    ladder: 'Look for shade, soiling and damage first, with nothing opened.',
  },
  loop_resistance: {
    today: 'Plan a visit soon: a connector that gets hot gets worse, and can burn.',
    ladder: 'Look with a thermal camera under load, from a safe place. Open no connector under load.',
  },
  wrong_string: {
    today: 'Correct the as-built, or have one string isolated to see whose current goes to zero.',
    ladder: 'Read the serials where the units sit.',
  },
  weak_unit: {
    today: 'Watch it, or take a spare module and unit along on the next visit.',
    ladder: 'Look at the module’s glass, cells and leads before anything is taken off.',
  },
};
export const anyAdvice: CauseAdvice = {
  today: 'Look at its page and decide what has to be done.',
  ladder: 'Look before anything is opened.',
};

export const adviceTogether = {
  firstThePart: (part: string, today: string) => `${part} ${today}`,
};
