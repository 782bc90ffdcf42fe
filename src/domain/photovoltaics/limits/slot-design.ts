import { figure, type DesignFinding } from './design-finding';
import type { BuiltString } from './built-site';

const list = (items: readonly (string | number)[]): string =>
  items.length < 2
    ? String(items[0] ?? '')
    : `${items.slice(0, -1).join(', ')} and ${items[items.length - 1]}`;

/** Modules of one string whose imp differs by more than this share limit each other noticeably; own rule. */
const MISMATCH = 0.03;

/** What sits in the slots of one string: units that are not recorded, units and modules that don't belong together. */
export function slotFindings({ slots, unit }: Pick<BuiltString, 'slots' | 'unit'>): DesignFinding[] {
  const empty = slots.filter((s) => s.unitTypeName === null).map((s) => s.position);
  const foreign = slots.filter((s) => s.unitTypeName !== null && s.unitTypeName !== unit.name);
  const imps = slots.map((s) => s.module.impRef);
  const spread = Math.max(...imps) / Math.min(...imps) - 1;
  const types = new Set(slots.map((s) => s.module.name));
  const findings: DesignFinding[] = [
    {
      check: 'slots_without_unit',
      outcome: empty.length > 0 ? 'exceeded' : 'within',
      value: empty.length,
      limit: 0,
      unit: '',
      safety: true,
      words:
        empty.length > 0
          ? `No unit is recorded at position${empty.length > 1 ? 's' : ''} ${list(empty)}: a module wired straight in keeps its full voltage and the string can’t shut down.`
          : 'Every slot has its unit.',
      clause: 'As-built record; NEC 690.12',
      remedy: empty.length > 0 ? 'Read the serials there, or fit the missing units.' : null,
      alternatives: empty.length > 0 ? ['The unit is there and its serial was not recorded yet.'] : [],
    },
  ];
  if (foreign.length > 0)
    findings.push({
      check: 'mixed_units_in_string',
      outcome: 'exceeded',
      value: foreign.length,
      limit: 0,
      unit: '',
      safety: true,
      words: `Positions ${list(foreign.map((s) => s.position))} hold ${list([...new Set(foreign.map((s) => s.unitTypeName ?? ''))])}, the string is entered with ${unit.name}. They may start, stop and report differently.`,
      clause: 'Units’ instructions; common practice: one type in a string',
      remedy: 'Fit one unit type throughout, or correct the record.',
      alternatives: ['The serial was read with the wrong type.'],
    });
  if (types.size > 1)
    findings.push({
      check: 'mixed_modules_in_string',
      outcome: spread > MISMATCH ? 'exceeded' : 'within',
      value: Math.round(1000 * spread) / 10,
      limit: 100 * MISMATCH,
      unit: '',
      safety: false,
      words: `${types.size} module types stand in series (${list([...types])}); their currents at maximum power differ by ${figure(Math.round(1000 * spread) / 10, '%')}, and the lowest sets the string’s. It costs energy and is no hazard.`,
      clause: 'Own rule: 3 % of imp',
      remedy: spread > MISMATCH ? 'Sort the modules into strings by type.' : null,
      alternatives: [],
    });
  return findings;
}
