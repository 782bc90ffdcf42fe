import { checkFiguresSaid } from '../../../words/domain-check-figures';
import { earthFinding } from '../../readings/earth';
import { ORDINARY_METER } from '../../readings/reading';
import { connectorFigures } from './connectors';
import { currentWords } from './current';
import { numberOf, wordOf, written, type FigureWord } from './figure-word';
import { checkDefinition } from './list';
import { insulationTest } from './insulation';
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
    remedy: first?.remedy ?? (failed ? checkFiguresSaid.putRight : null),
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
              words: checkFiguresSaid.leadsUp,
              remedy: checkFiguresSaid.leadsUpRemedy,
              source: checkFiguresSaid.leadsUpSource,
            },
          ]
        : [];
    case 'face':
      return wordOf(figures, 'face') === 'label_in' && context.unitType.facesAllowed === 'label_out'
        ? [
            {
              weight: 'blocks',
              words: checkFiguresSaid.labelIn(context.unitType.name),
              remedy: checkFiguresSaid.labelInRemedy,
              source: checkFiguresSaid.labelInSource,
            },
          ]
        : [];
    case 'serials':
      return context.emptySlots > 0
        ? [
            {
              weight: 'blocks',
              words: checkFiguresSaid.noSerial(context.emptySlots, context.units),
              remedy: checkFiguresSaid.noSerialRemedy,
              source: checkFiguresSaid.noSerialSource,
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
          words: checkFiguresSaid.reversed(written(voltage)),
          remedy: checkFiguresSaid.reversedRemedy,
          source: checkFiguresSaid.reversedSource,
        },
      ]
    : [];

const continuity = (resistance: number | null): FigureWord[] =>
  resistance !== null && resistance > CONTINUITY_MOST_OHM
    ? [
        {
          weight: 'told',
          words: checkFiguresSaid.continuity(written(resistance), CONTINUITY_MOST_OHM),
          remedy: checkFiguresSaid.continuityRemedy,
          source: checkFiguresSaid.continuitySource,
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
        found.outcome === 'fault' ? checkFiguresSaid.earthFaultRemedy : checkFiguresSaid.earthUnclearRemedy,
      source: checkFiguresSaid.earthSource,
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
      remedy: checkFiguresSaid.testedAnywayRemedy,
      source: test.source,
    });
    return words;
  }
  if (test.allowed && !bypassed && volts > test.allowedV)
    words.push({
      weight: 'blocks',
      words: checkFiguresSaid.testVoltageHigh(volts, test.allowedV, context.unitType.name),
      remedy: checkFiguresSaid.testVoltageHighRemedy,
      source: checkFiguresSaid.testVoltageHighSource,
    });
  if (test.allowed && resistance !== null && resistance < test.table.leastResistanceMohm)
    words.push({
      weight: 'blocks',
      words: checkFiguresSaid.insulationLow(written(resistance), test.table.leastResistanceMohm),
      remedy: checkFiguresSaid.insulationLowRemedy,
      source: checkFiguresSaid.insulationLowSource,
    });
  if (test.allowed && volts > 0 && volts < test.table.testVoltage)
    words.push({
      weight: 'told',
      words: checkFiguresSaid.testVoltageLow(volts, test.table.testVoltage),
      remedy: null,
      source: test.source,
    });
  if (wordOf(figures, 'unitsState') === 'shutdown')
    words.push({
      weight: 'told',
      words: checkFiguresSaid.testedInShutdown,
      remedy: null,
      source: checkFiguresSaid.testedInShutdownSource,
    });
  return words;
}
