import { countAtStart, counted, listed, number, quantity, volts } from '../drawings/numbers';
import { clockOrDate } from '../drawings/times';
import { commandWords } from '../domain/verdicts/command-words';
import type { SlotNow, StringNow } from '../schemas/api/now';

/** The heading of a string's page and the sentence under it. A figure that carries the sentence is strong. */
export type Sentence = (string | { strong: string })[];
export interface Finding {
  kind:
    | 'not_shutting_down'
    | 'stuck'
    | 'positions_unknown'
    | 'unexplained'
    | 'unconfirmed'
    | 'in_shutdown'
    | 'dark'
    | 'no_data'
    | 'unheard'
    | 'silent'
    | 'unsteady'
    | 'low'
    | 'passing';
  heading: string;
  sentence: Sentence;
}
export interface When {
  now: string;
  timeZone: string;
}

const LIVE = 'Treat the string as live.';
const NOTHING = 'Nothing needs attention.';

export const unitsWhere = (string: StringNow, test: (slot: SlotNow) => boolean): SlotNow[] =>
  string.slots.filter((s) => s.serial !== null && test(s));

/** "Two of 14 units in B3 are", "The only unit in B3 is", "All 14 units in B3 are". */
function unitsAre(n: number, string: StringNow): string {
  const all = string.counts.units;
  if (n === all)
    return n === 1 ? `The only unit in ${string.name} is` : `All ${number(all)} units in ${string.name} are`;
  return `${countAtStart(n)} of ${counted(all, 'unit')} in ${string.name} ${n === 1 ? 'is' : 'are'}`;
}

/** "position 5", "positions 5 and 9". */
export const positionsInWords = (slots: readonly SlotNow[]): string =>
  `${slots.length === 1 ? 'position' : 'positions'} ${listed(slots.map((s) => s.position))}`;

/** How many modules' worth of voltage is missing; null where it is no whole number of them. */
export function modulesMissing(string: StringNow): number | null {
  const each = string.slots.find((s) => s.expected !== null)?.expected;
  if (!each || string.expectedVoltage === null || string.voltage === null) return null;
  const missing = (string.expectedVoltage - string.voltage) / each;
  const whole = Math.round(missing);
  return whole >= 1 && Math.abs(missing - whole) <= 0.3 ? whole : null;
}

function gap(string: StringNow): Sentence {
  if (string.voltage === null) return [];
  if (string.expectedVoltage === null) return ['The string gives ', { strong: volts(string.voltage) }, '.'];
  const missing = modulesMissing(string);
  const share =
    missing === null
      ? ''
      : `, the gap of ${missing === 1 ? 'one module' : `${countAtStart(missing).toLowerCase()} modules`}`;
  return [
    'The string gives ',
    { strong: volts(string.voltage) },
    ` where ${volts(string.expectedVoltage)} is expected${share}.`,
  ];
}

/** Whether the modules of held units are alive behind them, where the module side is measured. */
function alive(held: readonly SlotNow[]): string {
  const lit = held.flatMap((s) => (s.voltageIn !== null && s.voltageIn > 5 ? [s.voltageIn] : []));
  if (lit.length === 0 || lit.length !== held.length) return '';
  if (lit.length > 3)
    return ` Their own modules are alive: ${volts(Math.min(...lit))} or more at each input.`;
  if (lit.length === 2 && volts(lit[0]) === volts(lit[1]))
    return ` Their own modules are alive: ${volts(lit[0])} at each input.`;
  return lit.length === 1
    ? ` Its own module is alive: ${volts(lit[0])} at the input.`
    : ` Their own modules are alive: ${listed(lit.map((v) => volts(v)))} at the inputs.`;
}

function commanded(string: StringNow, when: When): string {
  const { command } = string;
  if (!command) return '';
  return `${commandWords(command.inForce)} (${command.where}) since ${clockOrDate(command.since, when.now, when.timeZone)}.`;
}

const isCommanded = (string: StringNow): boolean => !!string.command && string.command.inForce !== 'released';

/** What else is abnormal, behind the gravest. */
function besides(string: StringNow, said: readonly (keyof StringNow['counts'])[]): string {
  const others = (
    [
      ['stuck', 'stuck'],
      ['unconfirmed', 'unconfirmed'],
      ['silent', 'silent'],
      ['unheard', 'unheard'],
    ] as const
  ).filter(([key]) => !said.includes(key) && string.counts[key] > 0);
  if (others.length === 0) return '';
  return ` Besides, ${listed(others.map(([key, word]) => `${string.counts[key]} ${string.counts[key] === 1 ? 'is' : 'are'} ${word}`))}.`;
}

/** The gravest thing that can be said of a string now. */
export function findingOf(string: StringNow, when: When): Finding {
  const { counts, name } = string;
  if (counts.notShuttingDown > 0) {
    const live = unitsWhere(string, (s) => s.verdict === 'not_shutting_down');
    return {
      kind: 'not_shutting_down',
      heading:
        live.length === counts.units
          ? `None of ${name}’s ${counted(counts.units, 'unit')} shut down`
          : `${countAtStart(live.length)} of ${counted(counts.units, 'unit')} in ${name} did not shut down`,
      sentence: [
        `${commanded(string, when)} At ${positionsInWords(live)} voltage still stands`,
        ...(string.voltage === null
          ? ['.']
          : [': the string gives ', { strong: volts(string.voltage) }, '.']),
        ` ${LIVE}${besides(string, ['unconfirmed'])}`,
      ],
    };
  }
  if (string.finding?.kind === 'not_shutting_down')
    return {
      kind: 'not_shutting_down',
      heading: `${name} has not shut down`,
      sentence: [`${string.finding.words}. `, { strong: LIVE }],
    };
  if (counts.stuck > 0) {
    const held = unitsWhere(string, (s) => s.verdict === 'stuck');
    return {
      kind: 'stuck',
      heading: `${unitsAre(held.length, string)} stuck in shutdown`,
      sentence: [...gap(string), alive(held), besides(string, ['stuck'])],
    };
  }
  if (string.finding?.kind === 'stuck_positions_unknown')
    return {
      kind: 'positions_unknown',
      heading: `Some units in ${name} do not pass; positions unknown`,
      sentence: [`${string.finding.words}. `, ...gap(string)],
    };
  if (isCommanded(string)) return whileCommanded(string, when);
  if (string.finding?.kind === 'unexplained_voltage')
    return {
      kind: 'unexplained',
      heading: `${name}’s units do not explain its voltage`,
      sentence: [`${string.finding.words}. ${LIVE}`],
    };
  return whileReleased(string, when);
}

function whileCommanded(string: StringNow, when: When): Finding {
  const { counts, name } = string;
  if (counts.unconfirmed > 0 || string.kind === 'shutdown_only') {
    const all = counts.unconfirmed === counts.units || string.kind === 'shutdown_only';
    return {
      kind: 'unconfirmed',
      heading: all
        ? `Nothing shows that ${name} followed the shutdown`
        : `Shutdown of ${counts.unconfirmed} of ${counted(counts.units, 'unit')} in ${name} is not confirmed`,
      sentence: [
        commanded(string, when),
        string.kind === 'shutdown_only'
          ? ' Its units report nothing themselves, and an inverter can not read a few volts: only a rated meter at the home run shows it. '
          : ' Silent, dark and unheard units can not say what they do. ',
        { strong: LIVE },
      ],
    };
  }
  return {
    kind: 'in_shutdown',
    heading: `${name} is in shutdown on purpose`,
    sentence: [
      `${commanded(string, when)} ${counts.shutdown === counts.units ? `All ${counted(counts.units, 'unit')} report it` : `${counted(counts.shutdown, 'unit')} of ${number(counts.units)} report it so far`}`,
      ...(string.voltage === null ? ['.'] : ['; the string gives ', { strong: volts(string.voltage) }]),
      ...(string.voltage !== null && string.expectedInShutdown !== null
        ? [`, where ${volts(string.expectedInShutdown)} is expected in shutdown.`]
        : string.voltage === null
          ? []
          : ['.']),
      ' Each module and its leads to its unit stay at module voltage.',
    ],
  };
}

function whileReleased(string: StringNow, when: When): Finding {
  const { counts, name } = string;
  if (string.at === null)
    return {
      kind: 'no_data',
      heading: `${name} has not reported yet`,
      sentence: [
        string.kind === 'shutdown_only'
          ? 'Its units report nothing themselves, and no voltage has come from its input. '
          : 'No reading of its units has come. ',
        LIVE,
      ],
    };
  if (string.dark)
    return {
      kind: 'dark',
      heading: `${name} is dark: too little light to power its units`,
      sentence: [
        'That is no fault, and proves nothing of its conductors: the string is live again at first light.',
      ],
    };
  if (counts.unheard > 0)
    return {
      kind: 'unheard',
      heading:
        counts.unheard === counts.units
          ? `None of ${name}’s ${counted(counts.units, 'unit')} has answered the roll call`
          : `${unitsAre(counts.unheard, string)} unheard`,
      sentence: [
        'According to the type entered, a unit passes full module voltage until it has answered and does not obey the initiator. ',
        { strong: LIVE },
        besides(string, ['unheard']),
      ],
    };
  if (counts.silent > 0) {
    const silent = unitsWhere(string, (s) => s.state === 'silent');
    const last = silent
      .flatMap((s) => s.seen ?? [])
      .sort()
      .at(-1);
    return {
      kind: 'silent',
      heading: `${unitsAre(counts.silent, string)} silent`,
      sentence: [
        last ? `Last heard ${clockOrDate(last, when.now, when.timeZone)}. ` : '',
        string.current !== null && string.current > 0.1 && counts.silent < counts.units
          ? `The string carries ${quantity(string.current, 'A', 1)}, so power is not the trouble; `
          : '',
        'whether they follow a shutdown can not be confirmed until they are heard again.',
      ],
    };
  }
  const unsteady = unitsWhere(string, (s) => s.verdict === 'flapping' || s.verdict === 'late');
  if (unsteady.length > 0) {
    const flaps = unsteady.some((s) => s.verdict === 'flapping');
    return {
      kind: 'unsteady',
      heading: flaps
        ? `${countAtStart(unsteady.length)} of ${counted(counts.units, 'unit')} in ${name} ${unsteady.length === 1 ? 'goes' : 'go'} in and out of shutdown`
        : `${countAtStart(unsteady.length)} of ${counted(counts.units, 'unit')} in ${name} shut down late last time`,
      sentence: [
        `Look at ${positionsInWords(unsteady)}. `,
        flaps
          ? 'A keep-alive at the edge of hearing and a loose connector look like this.'
          : 'Within the time limit it must be next time.',
      ],
    };
  }
  return asExpected(string);
}

function asExpected(string: StringNow): Finding {
  const { counts, name, voltage, expectedBand } = string;
  if (string.kind === 'shutdown_only' && voltage === null)
    return {
      kind: 'no_data',
      heading: `Nothing is measured at ${name}’s input`,
      sentence: [
        `Its units report nothing themselves: without a voltage at the input nothing can be said. ${LIVE}`,
      ],
    };
  if (voltage !== null && expectedBand !== null && voltage < expectedBand[0] * 0.985)
    return {
      kind: 'low',
      heading:
        string.kind === 'shutdown_only'
          ? `${name} gives less than ${counted(counts.units, 'passing unit')} would`
          : `All ${counted(counts.units, 'unit')} in ${name} pass, yet its voltage is low`,
      sentence: gap(string),
    };
  const load =
    voltage === null
      ? []
      : [
          'The string gives ',
          { strong: volts(voltage) },
          string.current !== null ? ` at ${quantity(string.current, 'A', 1)}` : '',
          string.expectedFrom ? `, as expected from ${string.expectedFrom}. ` : '. ',
        ];
  return {
    kind: 'passing',
    heading:
      string.kind === 'shutdown_only'
        ? `${name} gives what ${counted(counts.units, 'passing unit')} would`
        : `${unitsAre(counts.passing, string)} passing`,
    sentence: [...load, NOTHING],
  };
}
