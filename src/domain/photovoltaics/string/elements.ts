import type { DiodeModel, DiodeReference } from '../module/diode-parameters';

/** A module as a string sees it. */
export interface StringModule {
  reference: DiodeReference;
  model?: DiodeModel;
  /** V across a conducting bypass diode, 0 to 2; ideal diodes with no reverse breakdown of the cells behind them. */
  bypassForwardVoltage: number;
}

/** One sub-string of cells with its diode: light in W/m² and temperature in °C. */
export interface BypassGroup {
  poaGlobal: number;
  temperatureCell: number;
}

/** What may sit at a place of a series string. */
export type StringElement =
  /** A module whose unit passes it on, or that has none. */
  | { kind: 'module'; module: StringModule; groups: readonly BypassGroup[] }
  /** A module connected the wrong way round. */
  | { kind: 'reversed'; module: StringModule; groups: readonly BypassGroup[] }
  /** A unit in shutdown, powered: shutdownVoltage open circuit, bypassVoltage (negative) under current. */
  | { kind: 'in_shutdown'; shutdownVoltage: number; bypassVoltage: number }
  /** A unit whose module is not mated to it: adds nothing, and current goes by its bypass path. */
  | { kind: 'unpowered'; bypassVoltage: number }
  /** A place bridged by its neighbours' leads. */
  | { kind: 'missing' }
  /** A lead left open: no current, and a floating reading at the ends. */
  | { kind: 'open' }
  /** A unit that lowers its output voltage to raise its current; output never above input. */
  | {
      kind: 'optimizing';
      module: StringModule;
      groups: readonly BypassGroup[];
      /** 0.5 to 1 */
      efficiency: number;
      /** A; beyond it the unit bypasses. */
      currentOutMax: number;
      bypassVoltage: number;
    };

/** A module of `groups` sub-strings all in the same light. */
export function evenly(groups: number, poaGlobal: number, temperatureCell: number): BypassGroup[] {
  return Array.from({ length: groups }, () => ({ poaGlobal, temperatureCell }));
}
