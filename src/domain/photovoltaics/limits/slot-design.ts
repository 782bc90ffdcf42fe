import { slotDesignSaid as said } from '../../../words/domain-photovoltaics-limits';
import { figure, type DesignFinding } from './design-finding';
import type { BuiltString } from './built-site';

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
      words: empty.length > 0 ? said.withoutUnit(empty) : said.allWithUnit,
      clause: said.withoutUnitClause,
      remedy: empty.length > 0 ? said.withoutUnitRemedy : null,
      alternatives: empty.length > 0 ? [said.notRecordedYet] : [],
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
      words: said.mixedUnits(
        foreign.map((s) => s.position),
        [...new Set(foreign.map((s) => s.unitTypeName ?? ''))],
        unit.name,
      ),
      clause: said.mixedUnitsClause,
      remedy: said.mixedUnitsRemedy,
      alternatives: [said.readWrong],
    });
  if (types.size > 1)
    findings.push({
      check: 'mixed_modules_in_string',
      outcome: spread > MISMATCH ? 'exceeded' : 'within',
      value: Math.round(1000 * spread) / 10,
      limit: 100 * MISMATCH,
      unit: '',
      safety: false,
      words: said.mixedModules([...types], figure(Math.round(1000 * spread) / 10, '%')),
      clause: said.mixedModulesClause,
      remedy: spread > MISMATCH ? said.mixedModulesRemedy : null,
      alternatives: [],
    });
  return findings;
}
