/** What a catalogue entry says of a unit (module-level power electronics). Behaviour is data: kinds are presets. */

export const UNIT_KINDS = ['shutdown_only', 'monitored', 'optimizing'] as const;
export type UnitKind = (typeof UNIT_KINDS)[number];

export interface UnitType {
  name: string;
  kind: UnitKind;
  /** What a unit does before anything has spoken to it. */
  outOfBox: 'shutdown' | 'passing';
  releasedBy: 'keep_alive' | 'logger';
  /** What a unit does when its command or keep-alive stops; `shuts_down` after `commandLossAfterS` seconds. */
  onCommandLoss: 'shuts_down' | 'holds';
  commandLossAfterS: number;
  /** V let through by one unit in shutdown, open circuit. */
  shutdownVoltage: { nominal: number; min: number; max: number };
  /** V across a unit in shutdown while string current flows through its bypass path; negative. */
  bypassVoltage: number;
  measures: 'none' | 'input' | 'output' | 'both';
  /** Relative (0.01 = 1 %). */
  voltageAccuracy: number;
  /** Relative (0.01 = 1 %). */
  currentAccuracy: number;
  /** V */
  voltageInMax: number;
  /** A */
  currentMax: number;
  /** V; null: the maker allows no insulation test through the unit. */
  insulationTestMax: number | null;
  facesAllowed: 'either' | 'label_out';
}

type Preset = Omit<UnitType, 'name'>;

const SHARED = {
  commandLossAfterS: 15,
  shutdownVoltage: { nominal: 0.6, min: 0.55, max: 0.66 }, // nominal: common practice; spread: from experience
  bypassVoltage: -0.5, // from experience: −0.3 to −0.7 V
  voltageAccuracy: 0.01,
  currentAccuracy: 0.01,
  voltageInMax: 80,
  currentMax: 15,
  insulationTestMax: null,
  facesAllowed: 'either',
  onCommandLoss: 'shuts_down',
} as const;

/** What a new catalogue entry of a kind starts from; every value can be changed. */
export const UNIT_PRESETS: Record<UnitKind, Preset> = {
  shutdown_only: {
    ...SHARED,
    kind: 'shutdown_only',
    outOfBox: 'shutdown',
    releasedBy: 'keep_alive',
    measures: 'none',
  },
  monitored: { ...SHARED, kind: 'monitored', outOfBox: 'passing', releasedBy: 'logger', measures: 'output' },
  optimizing: { ...SHARED, kind: 'optimizing', outOfBox: 'passing', releasedBy: 'logger', measures: 'both' },
};

/** All that the catalogue says of a unit. */
export interface UnitSheet extends UnitType {
  /** V */
  voltageSystemMax: number;
  /** W of the module behind it. */
  powerMax: number;
  /** Connector types towards the module and towards the neighbours; null: not entered. */
  connectorIn: string | null;
  connectorOut: string | null;
}
