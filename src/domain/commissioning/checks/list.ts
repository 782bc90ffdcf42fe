import { CONNECTOR_CLAUSE } from '../../equipment/connectors';
import { insulationTest } from './insulation';
import type { CheckContext, CheckDefinition, CheckKey, StringCheck } from './definition';

/** The checks as data. Sources: NEC and IEC clauses as quoted by others; the rest is common practice and says so. */

const PRACTICE = 'common practice';
const number = (
  key: string,
  name: string,
  unit: string,
  min: number,
  max: number,
  needed: boolean,
): CheckDefinition['figures'][number] => ({ key, kind: 'number', name, unit, min, max, needed });
const choice = (
  key: string,
  name: string,
  options: Record<string, string>,
  needed: boolean,
): CheckDefinition['figures'][number] => ({
  key,
  kind: 'choice',
  name,
  options: Object.entries(options).map(([value, words]) => ({ value, words })),
  needed,
});
const connector = (key: string, name: string, needed: boolean): CheckDefinition['figures'][number] => ({
  key,
  kind: 'connector',
  name,
  needed,
});

export const CHECKS: readonly CheckDefinition[] = [
  {
    key: 'lead_order',
    name: 'Order of leads',
    asks: 'Short leads go to the module, long leads to the neighbours; the module was mated first.',
    how: 'Follow each unit’s leads by hand. Short leads to its own module first, long leads to the next unit after.',
    source: PRACTICE,
    phase: 'mounting',
    figures: [],
    mayFollow: false,
  },
  {
    key: 'orientation',
    name: 'Orientation',
    asks: 'Leads leave the unit downwards or to a side, never upwards.',
    how: 'Look at every unit before the module goes down: water must not run along a lead into the housing.',
    source: PRACTICE,
    phase: 'mounting',
    figures: [
      choice(
        'leads',
        'Direction of the leads',
        { down: 'downwards', side: 'to a side', up: 'upwards' },
        false,
      ),
    ],
    mayFollow: false,
  },
  {
    key: 'face',
    name: 'Face to the back sheet',
    asks: 'The unit’s face lies as its type allows.',
    how: 'Compare with the type’s sheet: which face may look at the back sheet.',
    source: PRACTICE,
    phase: 'mounting',
    figures: [
      choice(
        'face',
        'Direction of the label',
        { label_out: 'away from the back sheet', label_in: 'at the back sheet' },
        false,
      ),
    ],
    mayFollow: false,
  },
  {
    key: 'mounting',
    name: 'Mounting',
    asks: 'Each unit sits firmly on the module’s frame, or on the rail where modules have no frame, with its air gap.',
    how: 'Pull at each unit. Between unit and back sheet there must be air; nothing lies on the roof.',
    source: PRACTICE,
    phase: 'mounting',
    figures: [choice('on', 'Mounted on', { frame: 'module frame', rail: 'rail' }, false)],
    mayFollow: false,
  },
  {
    key: 'connectors',
    name: 'Connector pairs',
    asks: 'Both halves of every mated pair are of the identical type and maker, or documented as intermatable.',
    how: 'Read maker and type off both halves and choose them. That halves click together proves nothing.',
    source: CONNECTOR_CLAUSE,
    phase: 'mounting',
    figures: [
      connector('moduleLead', 'Module lead', true),
      connector('unitInput', 'Unit lead towards the module', true),
      connector('unitOutput', 'Unit lead at the string’s end', false),
      connector('homeRun', 'Home run', false),
    ],
    mayFollow: false,
  },
  {
    key: 'strain_relief',
    name: 'Strain relief',
    asks: 'Leads hang clear of the roof and of edges, held without pull on any connector.',
    how: 'Look along the row from below. No loop touches the roof, no clip pinches a lead.',
    source: PRACTICE,
    phase: 'mounting',
    figures: [],
    mayFollow: false,
  },
  {
    key: 'labels',
    name: 'Labels',
    asks: 'String and home run are marked at both ends.',
    how: 'Read the marking at the array and at the inverter: the same name, polarity marked.',
    source: PRACTICE,
    phase: 'mounting',
    figures: [],
    mayFollow: false,
  },
  {
    key: 'serials',
    name: 'Serials recorded',
    asks: 'Serial and slot of every unit were recorded before its module went down.',
    how: 'Compare the as-built with the labels, position by position from the negative end.',
    source: PRACTICE,
    phase: 'mounting',
    figures: [],
    mayFollow: false,
  },
  {
    key: 'polarity',
    name: 'Polarity',
    asks: 'The lead marked + is positive.',
    how: 'String open and isolated, red lead on +, black lead on −: the reading carries no minus sign.',
    source: 'IEC 62446-1, clause 6.2',
    phase: 'before_energising',
    figures: [number('voltage', '+ to −', 'V', -2000, 2000, false)],
    mayFollow: false,
  },
  {
    key: 'earth_continuity',
    name: 'Earth continuity',
    asks: 'Frames and rails are joined to the earthing conductor.',
    how: 'Continuity tester from the main earthing terminal to frames and rails, lead resistance taken off.',
    source: 'common practice: no more than 1 Ω; local rules decide',
    phase: 'before_energising',
    figures: [number('resistance', 'Resistance', 'Ω', 0, 10_000, true)],
    mayFollow: false,
  },
  {
    key: 'voltage_to_earth',
    name: '+ and − to earth',
    asks: 'The string floats: neither conductor shows a steady voltage to earth.',
    how: 'String open and isolated. Measure + to −, then + to earth and − to earth; wait until each settles.',
    source: PRACTICE,
    phase: 'before_energising',
    figures: [
      number('between', '+ to −', 'V', -2000, 2000, true),
      number('positive', '+ to earth', 'V', -2000, 2000, true),
      number('negative', '− to earth', 'V', -2000, 2000, true),
    ],
    mayFollow: false,
  },
  {
    key: 'insulation',
    name: 'Insulation resistance',
    asks: 'The array is insulated from earth.',
    how: 'Only with the test voltage that the units’ maker allows. Record whether the units pass or are in shutdown.',
    source: 'IEC 62446-1, clause 6.7',
    phase: 'before_energising',
    figures: [
      choice('testVoltage', 'Test voltage', { 250: '250 V', 500: '500 V', 1000: '1000 V' }, true),
      number('resistance', 'Resistance', 'MΩ', 0, 100_000, true),
      choice(
        'unitsState',
        'State of the units',
        { passing: 'passing', shutdown: 'in shutdown', bypassed: 'not in the circuit' },
        true,
      ),
    ],
    mayFollow: false,
  },
  {
    key: 'string_current',
    name: 'String current',
    asks: 'The string carries the current of its neighbours.',
    how: 'Clamp meter round one conductor while the inverter runs and the light is steady; strings of one type one after the other.',
    source: 'IEC 62446-1, clause 6.5',
    phase: 'energised',
    figures: [
      number('current', 'Current', 'A', -100, 100, true),
      choice(
        'method',
        'Method',
        { operating: 'in operation', short_circuit: 'as short-circuit current' },
        true,
      ),
      number('poaGlobal', 'Irradiance in the plane', 'W/m²', 0, 1600, false),
    ],
    mayFollow: true,
  },
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
      return unitType.facesAllowed === 'either'
        ? {
            ...plain,
            asks: `Either face of the unit (${unitType.name}) may look at the back sheet, according to the type entered; the air gap is kept.`,
          }
        : {
            ...plain,
            asks: `The label of the unit (${unitType.name}) looks away from the back sheet, according to the type entered.`,
          };
    case 'labels':
      return ruleSet === 'none'
        ? plain
        : {
            ...plain,
            asks: 'String and home run are marked at both ends, and the rapid shutdown label and the initiator’s label are in place.',
            source:
              'NEC 690.12(D), 2023; 690.56(C) in the 2017 and 2020 editions, as label guides quote them',
          };
    case 'insulation': {
      const test = insulationTest(context);
      return test.allowed
        ? { ...plain, how: `${test.words} ${check.how}`, warning: test.warning, source: test.source }
        : {
            ...plain,
            asks: 'No test voltage is put on this string: the maker of its units allows none.',
            how: test.words,
            warning: test.warning,
            offersNotApplicable: test.reason,
            source: test.source,
          };
    }
    case 'string_current':
      return unitType.kind === 'optimizing'
        ? {
            ...plain,
            how: 'Units of this kind set their own output: strings need not carry like currents. Record what flows; it is not compared.',
          }
        : plain;
    default:
      return plain;
  }
}
