import type { InForce, StringFinding, UnitState, Verdict } from '../verdicts/codes';

/** The figures of one minute that a case keeps: when it was opened, and when Wakeline looked again. SI units, ISO times. */

export interface FiguresSlot {
  position: number;
  serial: string | null;
  state: UnitState | null;
  verdict: Verdict | null;
  /** V, output. */
  voltage: number | null;
  /** V that it should give if it were passing. */
  expected: number | null;
  assumed: boolean;
}

export interface FiguresString {
  id: string;
  name: string;
  /** Units tell nothing themselves: only the whole is known. */
  shutdownOnly: boolean;
  /** An optimizing string's voltage is set by the inverter: it says nothing of its units. */
  optimizing: boolean;
  /** Newest report; null: none yet. */
  at: string | null;
  voltage: number | null; // V
  expectedVoltage: number | null; // V, all passing
  /** V, where the expectation lies nine times in ten. */
  expectedBand: [number, number] | null;
  expectedInShutdown: number | null; // V, while shutdown is in force
  current: number | null; // A
  power: number | null; // W
  energyToday: number | null; // Wh since midnight at the site
  /** What was commanded other than released. */
  inForce: InForce | null;
  dark: boolean;
  finding: StringFinding | null;
  units: number;
  passing: number;
  shutdown: number;
  silent: number;
  stuck: number;
  notShuttingDown: number;
  unconfirmed: number;
  /** The newest night's judgement: of that day to what was expected. */
  output: { day: string; ratio: number } | null;
  /** Only of strings that the case is about. */
  slots: FiguresSlot[];
}

export type LightNow = 'light' | 'dim' | 'dark';

export interface CaseFigures {
  at: string;
  light: {
    is: LightNow;
    /** Sun above the horizon, degrees; negative below. */
    elevation: number;
    /** W/m² in the plane of a sensor; null: there is none, or its word is old. */
    poaGlobal: number | null;
  };
  site: { power: number | null; energyToday: number | null; reportedAt: string | null }; // W AC, Wh
  strings: FiguresString[];
}

/** The most strings whose units are kept one by one: more make a case's figures unreadable. */
export const STRINGS_WITH_UNITS = 12;

const one = (value: number, digits = 1): string => value.toFixed(digits);
const volts = (v: number | null): string => (v === null ? 'not known' : `${one(v)} V`);
const power = (w: number | null): string =>
  w === null ? 'not known' : w >= 1000 ? `${one(w / 1000, 2)} kW` : `${one(w, 0)} W`;
const energy = (wh: number | null): string =>
  wh === null ? 'not known' : wh >= 1000 ? `${one(wh / 1000, 2)} kWh` : `${one(wh, 0)} Wh`;

const LIGHT_WORDS: Record<LightNow, string> = { light: 'daylight', dim: 'dawn or dusk', dark: 'dark' };

/** "12 of 14 pass, 2 stuck"; for strings whose units say nothing, that. */
export function unitsInWords(s: FiguresString): string {
  if (s.shutdownOnly) return 'units tell nothing themselves';
  const parts = [`${s.passing} of ${s.units} pass`];
  if (s.notShuttingDown > 0) parts.push(`${s.notShuttingDown} not shutting down`);
  if (s.stuck > 0) parts.push(`${s.stuck} stuck`);
  const commanded = s.shutdown - s.stuck;
  if (commanded > 0) parts.push(`${commanded} in shutdown`);
  if (s.silent > 0) parts.push(`${s.silent} silent`);
  if (s.unconfirmed > 0) parts.push(`${s.unconfirmed} unconfirmed`);
  return parts.join(', ');
}

export interface ComparedLine {
  /** String's name, or what the line is about. */
  subject: string;
  figure: string;
  before: string;
  after: string | null;
}

const lineOf = (
  subject: string,
  figure: string,
  say: (f: FiguresString) => string,
  before: FiguresString | undefined,
  after: FiguresString | null | undefined,
): ComparedLine => ({
  subject,
  figure,
  before: before ? say(before) : 'not recorded',
  after: after === null ? null : after ? say(after) : 'not recorded',
});

const about = (s: FiguresString): string =>
  s.voltage === null
    ? 'not known'
    : `${volts(s.voltage)}${
        s.expectedInShutdown !== null
          ? `, ${volts(s.expectedInShutdown)} expected in shutdown`
          : s.expectedVoltage === null
            ? ''
            : ` of ${volts(s.expectedVoltage)}`
      }`;

/**
 * Before and after, line by line, for a table. `after` null: nothing was looked at again yet. Only strings that the case
 * is about, unless it names none; then the site's own figures.
 */
export function comparedFigures(before: CaseFigures, after: CaseFigures | null): ComparedLine[] {
  const lines: ComparedLine[] = [
    {
      subject: 'Site',
      figure: 'Light',
      before: lightInWords(before),
      after: after && lightInWords(after),
    },
    {
      subject: 'Site',
      figure: 'Power, AC',
      before: power(before.site.power),
      after: after && power(after.site.power),
    },
    {
      subject: 'Site',
      figure: 'Energy that day so far',
      before: energy(before.site.energyToday),
      after: after && energy(after.site.energyToday),
    },
  ];
  for (const then of before.strings.filter((s) => s.slots.length > 0)) {
    const now = after === null ? null : after.strings.find((s) => s.id === then.id);
    const line = (figure: string, say: (f: FiguresString) => string) =>
      lines.push(lineOf(then.name, figure, say, then, now));
    line('Voltage', about);
    line('Units', unitsInWords);
    line('Current', (s) => (s.current === null ? 'not known' : `${one(s.current, 2)} A`));
    line('Energy that day so far', (s) => energy(s.energyToday));
    if (then.output ?? now?.output)
      line('Output of the last day judged', (s) =>
        s.output ? `${one(s.output.ratio * 100, 0)} % of expected (${s.output.day})` : 'not judged',
      );
  }
  return lines;
}

export function lightInWords({ light }: CaseFigures): string {
  const sun = `sun ${one(Math.abs(light.elevation), 0)}° ${light.elevation >= 0 ? 'above' : 'below'} the horizon`;
  return `${LIGHT_WORDS[light.is]}, ${sun}${light.poaGlobal === null ? '' : `, ${one(light.poaGlobal, 0)} W/m² in the plane`}`;
}
