import { BAND, HEARD_MIN, NOT_STIRRED_BELOW } from '../../domain/commissioning/roll-call';
import { DAYS_LOOKED_AT, DAYS_LOW, LOSS_MIN, Z_LIMIT } from '../../domain/output/low-output';
import { ODDS_NEEDED } from '../../domain/output/membership';
import { DECISIVE_METHOD } from '../../words/domain-membership';
import { SIBLINGS_MIN, SUN_ENOUGH } from '../../domain/output/plane-reference';
import {
  DEVIATIONS as DEVIATIONS_LOOP,
  EXCESS_OHM,
  SIBLINGS_MIN as LOOPS_MIN,
} from '../../domain/output/resistance';
import {
  DEVIATIONS as DEVIATIONS_UNIT,
  HELD_BELOW,
  LOSS_MIN as LOSS_MIN_UNIT,
  MOSTLY,
  QUARTERS_MIN,
  UNITS_MIN,
} from '../../domain/output/weak-unit';
import { OUTSIDE_ARRAY_LIMIT_V } from '../../domain/verdicts/conductor-limits';
import { timeLimitOf } from '../../domain/verdicts/context';
import { number } from '../../drawings/numbers';
import { brackets, frac, n, op, row, sub, sum, sup, v, word } from './math';
import type { Note } from './note';
import { notesOutput } from '../../words/methods';

/** Notes on what is concluded from days of data, and from what people do on site. */

const { timeLimitS } = timeLimitOf('rapid_shutdown_30s');

export const OUTPUT_NOTES: readonly Note[] = [
  {
    key: 'low-output',
    title: notesOutput.lowOutput,
    computes: <>{notesOutput.eachDaysSpecificYield(DAYS_LOW, DAYS_LOOKED_AT)}</>,
    formulas: [
      {
        label: notesOutput.modifiedZScore,
        set: row(
          v('z'),
          op('='),
          frac(row(n(0.6745), brackets(v('x'), op('−'), word('median'))), word('MAD')),
          op('<'),
          n(-Z_LIMIT),
        ),
      },
    ],
    where: notesOutput.andAtLeastBelow(LOSS_MIN, SUN_ENOUGH),
    sources: [notesOutput.iglewiczHoaglin(Z_LIMIT), notesOutput.betweenStringsIec(LOSS_MIN)],
    limits: [
      notesOutput.fewerThanStringsIn(SIBLINGS_MIN),
      notesOutput.whereStringsShareAn,
      notesOutput.whatAllStringsOf,
    ],
  },
  {
    key: 'weak-unit',
    title: notesOutput.aWeakUnitIn,
    computes: <>{notesOutput.eachUnitsVoltageOver}</>,
    formulas: [
      {
        label: notesOutput.low,
        set: row(
          frac(sub(v('U'), v('i')), word('median')),
          op('<'),
          n(1),
          op('−'),
          word('max'),
          brackets(n(LOSS_MIN_UNIT), op(','), n(DEVIATIONS_UNIT), v('σ')),
        ),
      },
      {
        label: notesOutput.kOfMSub,
        set: row(
          n(1),
          op('−'),
          frac(sub(v('U'), v('i')), word('median')),
          op('≈'),
          frac(v('k'), v('m')),
          op('+'),
          frac(row(n(0.5), word(' V')), word('median')),
        ),
      },
    ],
    where: notesOutput.isMadOverThe(HELD_BELOW, MOSTLY),
    sources: [
      notesOutput.robustStandardDeviationsIglewicz(DEVIATIONS_UNIT, LOSS_MIN_UNIT),
      notesOutput.halfAVoltAcross,
    ],
    limits: [
      notesOutput.fewerThanUnitsOr(UNITS_MIN, QUARTERS_MIN),
      notesOutput.anOptimizingUnitMoves,
      notesOutput.unitsInParallelStrings,
      notesOutput.unitsThatReportNothing,
    ],
  },
  {
    key: 'membership',
    title: notesOutput.wrongPlaceOnThe,
    computes: <>{notesOutput.unitsInSeriesCarry}</>,
    formulas: [
      {
        label: notesOutput.oddsNeeded,
        set: row(
          word('ln '),
          frac(
            row(v('P'), brackets(v('I'), op('|'), word(notesOutput.otherString))),
            row(v('P'), brackets(v('I'), op('|'), word(notesOutput.ownString))),
          ),
          op('≥'),
          n(number(ODDS_NEEDED, 1)),
        ),
      },
    ],
    sources: [notesOutput.currentsInSeriesAre, notesOutput.aWrongPlaceIs],
    limits: [notesOutput.namesTheOtherString, notesOutput.beforeTheInverterRuns, DECISIVE_METHOD],
  },
  {
    key: 'resistance',
    title: notesOutput.aConnectorGoingBad,
    computes: <>{notesOutput.betweenTheUnitsAnd}</>,
    formulas: [
      {
        label: notesOutput.loopOfAString,
        set: row(
          sum(v('i')),
          sub(v('U'), v('i')),
          op('−'),
          sub(v('U'), word('input')),
          op('='),
          v('a'),
          op('+'),
          v('b'),
          v('U'),
          op('+'),
          v('R'),
          v('I'),
        ),
      },
      { label: notesOutput.heat, set: row(v('P'), op('='), sup(v('I'), n(2)), v('R')) },
    ],
    where: notesOutput.isTheMeanOf(EXCESS_OHM, DEVIATIONS_LOOP, LOOPS_MIN),
    sources: [notesOutput.theilSenSlopesP, notesOutput.threshold10WIn],
    limits: [notesOutput.bothEndsMustBe, notesOutput.connectorsBetweenAModule, notesOutput.aCableIsTold],
  },
  {
    key: 'shutdown-test',
    title: notesOutput.theShutdownTest,
    computes: <>{notesOutput.aPassNeedsA}</>,
    formulas: [
      {
        label: notesOutput.passOfAString,
        set: row(
          word('max'),
          brackets(
            op('|'),
            sub(v('U'), word('+−')),
            op('|'),
            op(','),
            op('|'),
            sub(v('U'), word('+e')),
            op('|'),
            op(','),
            op('|'),
            sub(v('U'), word('−e')),
            op('|'),
          ),
          op('≤'),
          n(OUTSIDE_ARRAY_LIMIT_V),
          word(notesOutput.vAt),
          v('t'),
          op('≤'),
          n(timeLimitS),
          word(' s'),
        ),
      },
    ],
    sources: [notesOutput.withinNecAndLater(OUTSIDE_ARRAY_LIMIT_V, timeLimitS)],
    limits: [
      notesOutput.aResultSpeaksOf,
      notesOutput.withoutLightThatPowers,
      notesOutput.withSeveralTransmittersEach,
    ],
  },
  {
    key: 'roll-call',
    title: notesOutput.theForecastOfA,
    computes: <>{notesOutput.howManyOfThe}</>,
    formulas: [
      {
        label: notesOutput.notYetHeardAfter,
        set: row(
          v('S'),
          brackets(v('t')),
          op('='),
          v('ν'),
          op('+'),
          brackets(n(1), op('−'), v('ν')),
          sup(v('e'), row(op('−'), sup(brackets(frac(v('t'), v('λ'))), v('k')))),
        ),
      },
    ],
    where: notesOutput.neverAnswerTheBand(BAND, NOT_STIRRED_BELOW),
    sources: [notesOutput.cureModelBoag1949],
    limits: [notesOutput.fewerThanHeardSay(HEARD_MIN), notesOutput.untilTheRollCall],
  },
  {
    key: 'yields',
    title: notesOutput.yieldsAndThePerformance,
    computes: <>{notesOutput.whatThePlantMade}</>,
    formulas: [
      {
        label: notesOutput.performanceRatio,
        set: row(
          word('PR'),
          op('='),
          frac(sub(v('Y'), v('f')), sub(v('Y'), v('r'))),
          op('='),
          frac(row(v('E'), op('/'), sub(v('P'), n(0))), row(v('H'), op('/'), sub(v('G'), word('ref')))),
        ),
      },
    ],
    where: notesOutput.theCorrectedRatioWeighs,
    sources: [notesOutput.iec6172412017],
    limits: [notesOutput.anIntervalCountsOnly, notesOutput.saysNothingOfWhy],
  },
];
