import { checkFigureTexts, checkTexts, stringCheckSaid } from '../../../words/domain-checks';
import { insulationTest } from './insulation';
import type { CheckContext, CheckDefinition, CheckKey, Figure, StringCheck } from './definition';

/** The checks as data. Sources: NEC and IEC clauses as quoted by others; the rest is common practice and says so. */

const number = (
  key: string,
  texts: { name: string },
  unit: string,
  min: number,
  max: number,
  needed: boolean,
): Figure => ({ key, kind: 'number', name: texts.name, unit, min, max, needed });
const choice = <V extends string>(
  key: string,
  texts: { name: string; options: Record<V, string> },
  values: readonly V[],
  needed: boolean,
): Figure => ({
  key,
  kind: 'choice',
  name: texts.name,
  options: values.map((value) => ({ value, words: texts.options[value] })),
  needed,
});
const connector = (key: string, texts: { name: string }, needed: boolean): Figure => ({
  key,
  kind: 'connector',
  name: texts.name,
  needed,
});

const said = checkFigureTexts;
const check = (
  key: CheckKey,
  phase: CheckDefinition['phase'],
  figures: readonly Figure[] = [],
  mayFollow = false,
): CheckDefinition => ({ key, ...checkTexts[key], phase, figures, mayFollow });

export const CHECKS: readonly CheckDefinition[] = [
  check('lead_order', 'mounting'),
  check('orientation', 'mounting', [choice('leads', said.orientation.leads, ['down', 'side', 'up'], false)]),
  check('face', 'mounting', [choice('face', said.face.face, ['label_out', 'label_in'], false)]),
  check('mounting', 'mounting', [choice('on', said.mounting.on, ['frame', 'rail'], false)]),
  check('connectors', 'mounting', [
    connector('moduleLead', said.connectors.moduleLead, true),
    connector('unitInput', said.connectors.unitInput, true),
    connector('unitOutput', said.connectors.unitOutput, false),
    connector('homeRun', said.connectors.homeRun, false),
  ]),
  check('strain_relief', 'mounting'),
  check('labels', 'mounting'),
  check('serials', 'mounting'),
  check('polarity', 'before_energising', [number('voltage', said.polarity.voltage, 'V', -2000, 2000, false)]),
  check('earth_continuity', 'before_energising', [
    number('resistance', said.earth_continuity.resistance, 'Ω', 0, 10_000, true),
  ]),
  check('voltage_to_earth', 'before_energising', [
    number('between', said.voltage_to_earth.between, 'V', -2000, 2000, true),
    number('positive', said.voltage_to_earth.positive, 'V', -2000, 2000, true),
    number('negative', said.voltage_to_earth.negative, 'V', -2000, 2000, true),
  ]),
  check('insulation', 'before_energising', [
    choice('testVoltage', said.insulation.testVoltage, ['250', '500', '1000'], true),
    number('resistance', said.insulation.resistance, 'MΩ', 0, 100_000, true),
    choice('unitsState', said.insulation.unitsState, ['passing', 'shutdown', 'bypassed'], true),
  ]),
  check(
    'string_current',
    'energised',
    [
      number('current', said.string_current.current, 'A', -100, 100, true),
      choice('method', said.string_current.method, ['operating', 'short_circuit'], true),
      number('poaGlobal', said.string_current.poaGlobal, 'W/m²', 0, 1600, false),
    ],
    true,
  ),
];

const BY_KEY = new Map<CheckKey, CheckDefinition>(CHECKS.map((c) => [c.key, c]));
/** The definition of a check. @throws RangeError for a key that is none */
export function checkDefinition(key: CheckKey): CheckDefinition {
  const found = BY_KEY.get(key);
  if (!found) throw new RangeError(`check: ${String(key)} is none of ${[...BY_KEY.keys()].join(', ')}`);
  return found;
}

/** The checks as they are asked of one string: by its unit type and by the rule set of its site. */
export function checksFor(
  context: Pick<CheckContext, 'unitType' | 'ruleSet' | 'module' | 'units'>,
): StringCheck[] {
  return CHECKS.map((c) => asked(c, context));
}

function asked(
  check: CheckDefinition,
  context: Pick<CheckContext, 'unitType' | 'ruleSet' | 'module' | 'units'>,
): StringCheck {
  const plain: StringCheck = { ...check, offersNotApplicable: null, warning: null };
  const { unitType, ruleSet } = context;
  switch (check.key) {
    case 'face':
      return {
        ...plain,
        asks:
          unitType.facesAllowed === 'either'
            ? stringCheckSaid.eitherFace(unitType.name)
            : stringCheckSaid.labelOut(unitType.name),
      };
    case 'labels':
      return ruleSet === 'none'
        ? plain
        : {
            ...plain,
            asks: stringCheckSaid.shutdownLabels,
            source: stringCheckSaid.shutdownLabelsSource,
          };
    case 'insulation': {
      const test = insulationTest(context);
      return test.allowed
        ? {
            ...plain,
            how: stringCheckSaid.insulationHow(test.words, check.how),
            warning: test.warning,
            source: test.source,
          }
        : {
            ...plain,
            asks: stringCheckSaid.noTestVoltage,
            how: test.words,
            warning: test.warning,
            offersNotApplicable: test.reason,
            source: test.source,
          };
    }
    case 'string_current':
      return unitType.kind === 'optimizing' ? { ...plain, how: stringCheckSaid.optimizingCurrent } : plain;
    default:
      return plain;
  }
}
