import type { ConnectorIdentity, DocumentedPair } from '../../equipment/connectors';
import type { ModuleType } from '../../equipment/module-type';
import type { UnitType } from '../../equipment/unit-type';
import type { RuleSet } from '../../verdicts/context';
import type { CheckContext, CheckKey, CheckResult, CheckStanding, Figures } from './definition';

/** A site as a phone or a page holds it, as far as the checks are judged by it. Types stand once, strings point at them. */

export interface RecordedCheck {
  check: CheckKey;
  result: CheckResult;
  reason: string;
  figures: Figures;
  /** ISO 8601. */
  at: string;
}
export interface CheckedString {
  id: string;
  name: string;
  units: number;
  serials: readonly (string | null)[];
  unitTypeId: string;
  moduleTypeId: string;
  plane: string;
  checks: readonly RecordedCheck[];
}
export interface CheckedSite {
  site: { ruleSet: RuleSet };
  unitTypes: readonly (UnitType & { id: string })[];
  moduleTypes: readonly (ModuleType & { id: string })[];
  connectors: readonly ConnectorIdentity[];
  pairs: readonly DocumentedPair[];
  strings: readonly CheckedString[];
}

export const standingOf = (record: RecordedCheck): CheckStanding => ({
  check: record.check,
  result: record.result,
  reason: record.reason,
  figures: record.figures,
  atS: Date.parse(record.at) / 1000,
});

/** What one string's checks are judged by. @throws RangeError when the site does not hold the string or its types */
export function checkContext(sheet: CheckedSite, stringId: string): CheckContext {
  const string = sheet.strings.find((s) => s.id === stringId);
  const unitType = sheet.unitTypes.find((t) => t.id === string?.unitTypeId);
  const module = sheet.moduleTypes.find((t) => t.id === string?.moduleTypeId);
  if (!string || !unitType || !module)
    throw new RangeError(`string ${stringId}: not on this sheet, or its types`);
  return {
    units: string.units,
    emptySlots: Math.max(0, string.units - string.serials.filter((s) => s !== null).length),
    unitType,
    module,
    ruleSet: sheet.site.ruleSet,
    connectors: sheet.connectors,
    pairs: sheet.pairs,
    siblingCurrents: sheet.strings
      .filter(
        (s) =>
          s.id !== string.id &&
          s.unitTypeId === string.unitTypeId &&
          s.moduleTypeId === string.moduleTypeId &&
          s.plane === string.plane,
      )
      .flatMap((s) =>
        s.checks
          .filter((c) => c.check === 'string_current' && c.result !== 'not_applicable')
          .flatMap((c) => {
            const { current, poaGlobal, method } = c.figures;
            return typeof current === 'number' && current > 0
              ? [
                  {
                    string: s.name,
                    currentA: current,
                    method: typeof method === 'string' ? method : '',
                    poaGlobal: typeof poaGlobal === 'number' ? poaGlobal : null,
                    atS: Date.parse(c.at) / 1000,
                  },
                ]
              : [];
          }),
      ),
  };
}
