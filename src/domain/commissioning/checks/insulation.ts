import { insulationSaid } from '../../../words/domain-checks';
import type { CheckContext } from './definition';

/**
 * Insulation resistance of a string, as far as the units' maker allows a test through them.
 *
 * Test voltages by system voltage: IEC 62446:2009 clause 5.4.7 and IEC 62446-1 Table 2, as a training poster quotes them
 * (secondary). Least resistances: from memory of the same table, and said to be.
 */
const TABLE = [
  { belowV: 120, testV: 250, leastMohm: 0.5 },
  { belowV: 500, testV: 500, leastMohm: 1 },
  { belowV: Infinity, testV: 1000, leastMohm: 1 },
] as const;

export interface InsulationTable {
  /** 1.25 · voc of the string at STC, V. */
  systemVoltage: number;
  testVoltage: number;
  leastResistanceMohm: number;
}
/** What the table asks of a string of `units` modules with `vocRef` V each. */
export function insulationTable(units: number, vocRef: number): InsulationTable {
  const systemVoltage = 1.25 * units * vocRef;
  // the table's middle line reaches up to and with 500 V
  const row =
    TABLE.find((r) => systemVoltage < r.belowV || (r.belowV === 500 && systemVoltage === 500)) ?? TABLE[2];
  return { systemVoltage, testVoltage: row.testV, leastResistanceMohm: row.leastMohm };
}

export type InsulationTest =
  | { allowed: false; words: string; warning: string; reason: string; source: string }
  | {
      allowed: true;
      table: InsulationTable;
      /** V: what the maker of the units allows at most. */
      allowedV: number;
      words: string;
      warning: string | null;
      source: string;
    };

/** What may be tested at a string: nothing where the unit type says that its maker allows none. */
export function insulationTest(context: Pick<CheckContext, 'unitType' | 'module' | 'units'>): InsulationTest {
  const { unitType, module, units } = context;
  const allowedV = unitType.insulationTestMax;
  if (allowedV === null)
    return {
      allowed: false,
      words: insulationSaid.noneAllowed(unitType.name),
      warning: insulationSaid.noneAllowedWarning,
      reason: insulationSaid.noneAllowedReason,
      source: insulationSaid.unitTypeSource,
    };
  const table = insulationTable(units, module.vocRef);
  const short = allowedV < table.testVoltage;
  return {
    allowed: true,
    table,
    allowedV,
    words: insulationSaid.atMost(allowedV, unitType.name, table.testVoltage, Math.round(table.systemVoltage)),
    warning: short ? insulationSaid.stayBelow(allowedV) : insulationSaid.shutdownHides,
    source: insulationSaid.tableSource,
  };
}
