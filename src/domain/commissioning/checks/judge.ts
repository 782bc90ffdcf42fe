import { earthFinding } from '../../readings/earth';
import { ORDINARY_METER } from '../../readings/reading';
import { connectorFigures } from './connectors';
import { currentWords } from './current';
import { numberOf, wordOf, written, type FigureWord } from './figure-word';
import { checkDefinition } from './list';
import { LEAST_RESISTANCE_SOURCE, insulationTest } from './insulation';
import type { CheckContext, CheckJudgement, CheckStanding, Figures } from './definition';

/** Common practice, no published limit is held here: said so wherever it is used. */
const CONTINUITY_MOST_OHM = 1;

/**
 * What was recorded, held against its own figures and against what is known of the string. A fail always blocks; a
 * pass that its figures contradict blocks too, and says why. Not applicable is taken as said, with its reason.
 */
export function judgeCheck(standing: CheckStanding, context: CheckContext): CheckJudgement {
  const definition = checkDefinition(standing.check);
  const words = figureWords(standing, context);
  const contradicting = words.filter((w) => w.weight === 'blocks');
  const failed = standing.result === 'fail';
  const contradicts = standing.result === 'pass' && contradicting.length > 0;
  const told = standing.result === 'pass' ? words : words.filter((w) => w.weight === 'blocks');
  const first = contradicting[0] ?? told[0];
  return {
    weight: failed || contradicts ? 'blocks' : told.length > 0 ? 'told' : 'none',
    contradicts,
    fireRisk: words.some((w) => w.fireRisk === true),
    words: told.map((w) => w.words),
    remedy: first?.remedy ?? (failed ? 'Put it right, then record the check again.' : null),
    source: first?.source ?? definition.source,
  };
}

function figureWords(standing: CheckStanding, context: CheckContext): FigureWord[] {
  const { figures } = standing;
  switch (standing.check) {
    case 'orientation':
      return wordOf(figures, 'leads') === 'up'
        ? [
            {
              weight: 'blocks',
              words: 'Leads leave a unit upwards: water runs along them into the housing.',
              remedy: 'Turn the unit so that its leads go down or to a side.',
              source: 'common practice',
            },
          ]
        : [];
    case 'face':
      return wordOf(figures, 'face') === 'label_in' && context.unitType.facesAllowed === 'label_out'
        ? [
            {
              weight: 'blocks',
              words: `The label looks at the back sheet; ${context.unitType.name} allows it only the other way, according to the type entered.`,
              remedy: 'Turn the unit over, or correct the type if its sheet allows either face.',
              source: 'unit type as entered',
            },
          ]
        : [];
    case 'serials':
      return context.emptySlots > 0
        ? [
            {
              weight: 'blocks',
              words: `${context.emptySlots} of ${context.units} slots ${context.emptySlots === 1 ? 'has' : 'have'} no serial on the as-built.`,
              remedy: 'Read the serials on the roof, or import them.',
              source: 'as-built',
            },
          ]
        : [];
    case 'polarity':
      return reversed(numberOf(figures, 'voltage'));
    case 'earth_continuity':
      return continuity(numberOf(figures, 'resistance'));
    case 'voltage_to_earth':
      return toEarth(figures, context);
    case 'insulation':
      // where nothing was tested, nothing contradicts
      return standing.result === 'not_applicable' ? [] : insulation(figures, context);
    case 'connectors':
      return connectorFigures(figures, context);
    case 'string_current':
      return currentWords(standing, context);
    default:
      return [];
  }
}

const reversed = (voltage: number | null): FigureWord[] =>
  voltage !== null && voltage < 0
    ? [
        {
          weight: 'blocks',
          words: `${written(voltage)} V: the string is reversed at the meter or at its leads. Do not connect it.`,
          remedy: 'Check the leads at the meter first, then the marking of the home run; measure again.',
          source: 'IEC 62446-1, clause 6.2',
        },
      ]
    : [];

const continuity = (resistance: number | null): FigureWord[] =>
  resistance !== null && resistance > CONTINUITY_MOST_OHM
    ? [
        {
          weight: 'told',
          words: `${written(resistance)} Ω is above the ${CONTINUITY_MOST_OHM} Ω that is common practice.`,
          remedy:
            'Take off the resistance of the test leads, clean the joint and measure again; local rules decide.',
          source: 'common practice; local rules decide',
        },
      ]
    : [];

function toEarth(figures: Figures, context: CheckContext): FigureWord[] {
  const between = numberOf(figures, 'between');
  if (between === null) return [];
  const found = earthFinding(
    {
      units: context.units,
      voltageV: between,
      meter: ORDINARY_METER,
      earth: { positiveV: numberOf(figures, 'positive'), negativeV: numberOf(figures, 'negative') },
    },
    // whether all modules give alike is not known from three figures: the place is not told
    false,
  );
  const words = reversed(between);
  if (found && found.outcome !== 'no_fault_seen')
    words.push({
      weight: found.outcome === 'fault' ? 'blocks' : 'told',
      words: found.words,
      remedy:
        found.outcome === 'fault'
          ? 'Find the place where a conductor touches earth before anything is energised.'
          : 'Measure again, high-impedance input, and wait until each reading settles.',
      source: 'common practice',
    });
  return words;
}

function insulation(figures: Figures, context: CheckContext): FigureWord[] {
  const test = insulationTest(context);
  const volts = Number(wordOf(figures, 'testVoltage'));
  const resistance = numberOf(figures, 'resistance');
  const bypassed = wordOf(figures, 'unitsState') === 'bypassed';
  const words: FigureWord[] = [];
  if (!test.allowed && !bypassed) {
    words.push({
      weight: 'blocks',
      words: test.words,
      remedy: 'Record it as not applicable; have the units looked at if a test voltage was applied.',
      source: test.source,
    });
    return words;
  }
  if (test.allowed && !bypassed && volts > test.allowedV)
    words.push({
      weight: 'blocks',
      words: `${volts} V is more than the ${test.allowedV} V that the maker of ${context.unitType.name} allows: the units may be damaged.`,
      remedy: 'Have the units looked at, and test again with the voltage that is allowed.',
      source: 'unit type as entered',
    });
  if (test.allowed && resistance !== null && resistance < test.table.leastResistanceMohm)
    words.push({
      weight: 'blocks',
      words: `${written(resistance)} MΩ is below ${test.table.leastResistanceMohm} MΩ.`,
      remedy: 'Look for damaged insulation and moisture, part the array and measure its parts.',
      source: LEAST_RESISTANCE_SOURCE,
    });
  if (test.allowed && volts > 0 && volts < test.table.testVoltage)
    words.push({
      weight: 'told',
      words: `${volts} V is less than the ${test.table.testVoltage} V that the table asks for at this string’s voltage.`,
      remedy: null,
      source: test.source,
    });
  if (wordOf(figures, 'unitsState') === 'shutdown')
    words.push({
      weight: 'told',
      words: 'The units were in shutdown: what lies behind them was not tested.',
      remedy: null,
      source: 'common practice',
    });
  return words;
}
