import type { UnitKind, UnitType } from '../../domain/equipment/unit-type';

/** What ingest must know of one string to read a logger's reports under one version of its roster. */
export interface RosterEntry {
  stringId: number;
  siteId: number;
  name: string;
  kind: UnitKind;
  measures: UnitType['measures'];
  /** Per slot in position order: whether the roster names a unit there. */
  placed: boolean[];
}

/** One version of a logger's roster, as reports written under it are read. Keys as the wire names them. */
export interface RosterView {
  version: number;
  strings: Map<number, RosterEntry>;
  /** `inverter name` + newline + `input number` → input id. */
  inputs: Map<string, number>;
  inverters: Map<string, number>;
  sensors: Map<number, number>;
  zones: Map<string, number>;
  transmitters: Map<string, number>;
}

export const inputKey = (inverter: string, input: number): string => `${inverter}\n${input}`;

/** One string at one instant, checked, in the units of the wire, ready to be written. */
export interface FrameRow {
  stringId: number;
  siteId: number;
  /** Epoch seconds. */
  at: number;
  /** cV; all null where the type measures no output. */
  voltage: (number | null)[];
  /** cV */
  voltageIn: (number | null)[] | null;
  /** mA */
  current: (number | null)[];
  /** dW */
  power: (number | null)[] | null;
  /** 0.1 °C */
  temperature: (number | null)[];
  /** dBm */
  signal: (number | null)[];
  via: (number | null)[];
  state: (number | null)[];
}
