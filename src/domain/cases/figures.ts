import type { InForce, StringFinding, UnitState, Verdict } from '../verdicts/codes';

/** The figures of one minute that a case keeps: when it was opened, and when Wakeline looked again. SI units, ISO times. */

export interface FiguresSlot {
  position: number;
  serial: string | null;
  state: UnitState | null;
  verdict: Verdict | null;
  /** V, output. */
  voltage: number | null;
  /** V, module side. */
  voltageIn: number | null;
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
  unheard: number;
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

/** The most strings whose units are kept one by one, as many as the evidence draws. */
export const STRINGS_WITH_UNITS = 16;
