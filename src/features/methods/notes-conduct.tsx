import { UNIT_PRESETS } from '../../domain/equipment/unit-type';
import { SIBLINGS_FOR_SPREAD } from '../../domain/output/expected';
import { PRIORS } from '../../domain/readings/hypotheses';
import { TELL_FROM } from '../../domain/readings/interpret';
import { OUTSIDE_ARRAY_LIMIT_V } from '../../domain/verdicts/conductor-limits';
import {
  AGREEING,
  DEVIATIONS,
  FLOWS_FROM_A,
  INPUTS_DIFFER,
  STEADY_DEVIATIONS,
  STEADY_S,
} from '../../domain/verdicts/conductors';
import { judgementTimes, timeLimitOf } from '../../domain/verdicts/context';
import { SILENT_AFTER_INTERVALS } from '../../domain/verdicts/judge';
import { brackets, frac, n, op, row, sub, sum, v, word } from './math';
import type { Note } from './note';
import { notesConduct } from '../../words/methods';

/** Notes on what is concluded from one moment: readings, claims, conductors, causes, the expected voltage. */

const { timeLimitS } = timeLimitOf('rapid_shutdown_30s');
const MINUTELY = judgementTimes(60, timeLimitS);
const { nominal, min, max } = UNIT_PRESETS.shutdown_only.shutdownVoltage;

export const CONDUCT_NOTES: readonly Note[] = [
  {
    key: 'reading',
    title: notesConduct.whatAMeterReading,
    computes: <>{notesConduct.everyWayInWhich(TELL_FROM)}</>,
    formulas: [
      {
        label: notesConduct.chanceOfAnExplanation,
        set: row(
          v('P'),
          brackets(v('h'), op('|'), v('U')),
          op('='),
          frac(
            row(
              sub(v('π'), v('h')),
              v('N'),
              brackets(v('U'), op(';'), sub(v('μ'), v('h')), op(','), sub(v('σ'), v('h'))),
            ),
            row(
              sum(v('k')),
              sub(v('π'), v('k')),
              v('N'),
              brackets(v('U'), op(';'), sub(v('μ'), v('k')), op(','), sub(v('σ'), v('k'))),
            ),
          ),
        ),
      },
      {
        label: notesConduct.voltageThatAnExplanation,
        set: row(
          sub(v('μ'), v('h')),
          op('='),
          v('p'),
          sub(v('U'), word('oc')),
          op('+'),
          v('s'),
          sub(v('U'), word('sd')),
        ),
      },
    ],
    where: notesConduct.unitsPassTheirModules(nominal, min, max, PRIORS.asExpected),
    sources: [
      notesConduct.unitInShutdownCommon(nominal),
      notesConduct.openCircuitVoltageFrom,
      notesConduct.toleranceOfTheSheet,
    ],
    limits: [
      notesConduct.oneReadingOfA,
      notesConduct.theTypeOfUnit,
      notesConduct.atNightAndUnder,
      notesConduct.readingsToEarthThat,
    ],
  },
  {
    key: 'verdict',
    title: notesConduct.stateAndVerdictOf,
    computes: <>{notesConduct.theStatePassingIn}</>,
    formulas: [
      {
        label: notesConduct.notShuttingDown,
        set: row(
          sub(v('t'), word('passing')),
          op('>'),
          sub(v('t'), word('command')),
          op('+'),
          sub(v('T'), word('limit')),
        ),
      },
      {
        label: notesConduct.stuck,
        set: row(
          sub(v('t'), word(notesConduct.inShutdown)),
          op('≥'),
          word('max'),
          brackets(
            sub(v('t'), word('first')),
            op(','),
            sub(v('t'), word('release')),
            op(','),
            sub(v('t'), word('change')),
            op(','),
            sub(v('t'), word('light')),
          ),
          op('+'),
          sub(v('T'), word('grace')),
        ),
      },
      {
        label: notesConduct.silent,
        set: row(
          v('t'),
          op('−'),
          sub(v('t'), word('heard')),
          op('≥'),
          n(SILENT_AFTER_INTERVALS),
          sub(v('T'), word('report')),
        ),
      },
    ],
    where: notesConduct.withReportsEveryThe(MINUTELY.graceS, MINUTELY.flapChanges, MINUTELY.flapWindowS),
    sources: [
      notesConduct.timeLimit(
        timeLimitS,
        timeLimitOf('rapid_shutdown_30s').source,
        timeLimitOf('rapid_shutdown_10s').timeLimitS,
        timeLimitOf('rapid_shutdown_10s').source,
      ),
      notesConduct.graceSilenceAndFlapping,
    ],
    limits: [
      notesConduct.aClaimIsOnly,
      notesConduct.reportsComeAtIntervals,
      notesConduct.whileShutdownIsCommanded,
    ],
  },
  {
    key: 'conductors',
    title: notesConduct.whatTheConductorsSay,
    computes: <>{notesConduct.theVoltageOfAn(AGREEING.not_shutting_down)}</>,
    formulas: [
      {
        label: notesConduct.thresholdOnTheHome,
        set: row(
          sub(v('U'), word('max')),
          op('='),
          word('max'),
          brackets(n(OUTSIDE_ARRAY_LIMIT_V), word(' V'), op(','), n(2), v('n'), sub(v('U'), word('sd,max'))),
        ),
      },
      {
        label: notesConduct.outputsAgainstTheInput,
        set: row(
          op('|'),
          sum(v('i')),
          sub(v('U'), v('i')),
          op('−'),
          sub(v('U'), word('input')),
          op('|'),
          op('>'),
          word('max'),
          brackets(n(DEVIATIONS), v('σ'), op(','), frac(n(2), n(3)), sub(v('U'), word('module'))),
        ),
      },
      {
        label: notesConduct.heldUnitsOfA,
        set: row(
          v('k'),
          op('='),
          frac(
            row(v('n'), sub(v('U'), word('module')), op('−'), sub(v('U'), word('input'))),
            row(sub(v('U'), word('module')), op('−'), sub(v('U'), word('held'))),
          ),
        ),
      },
    ],
    where: notesConduct.heldUnitsAreCounted(STEADY_DEVIATIONS, STEADY_S, INPUTS_DIFFER),
    sources: [notesConduct.outsideTheArrayBoundary(OUTSIDE_ARRAY_LIMIT_V), notesConduct.twiceTheUnitsHighest],
    limits: [
      notesConduct.anInvertersCapacitorsHold(MINUTELY.capacitorHoldS, FLOWS_FROM_A),
      notesConduct.stringsThatShareAn,
      notesConduct.unitsThatMeasureTheir,
      notesConduct.aShadowThatStays,
      notesConduct.invertersReadAFew,
    ],
  },
  {
    key: 'causes',
    title: notesConduct.causes,
    computes: <>{notesConduct.theSmallestSetOf}</>,
    formulas: [
      {
        label: notesConduct.gainOfAnExplanation,
        set: row(
          v('G'),
          op('='),
          sum(word(notesConduct.showIt)),
          brackets(sub(v('c'), word('alone')), op('−'), sub(v('c'), word('shows'))),
          op('−'),
          sum(word(notesConduct.doNot)),
          sub(v('c'), word('spares')),
          op('−'),
          sub(v('c'), word('part')),
        ),
      },
    ],
    where: notesConduct.cAreCostsLn,
    sources: [notesConduct.greedyCoverVChvtal, notesConduct.costsOfFailuresFrom],
    limits: [notesConduct.inferredFromAfarOnly, notesConduct.partsThatTheAs],
  },
  {
    key: 'expected',
    title: notesConduct.theExpectedVoltage,
    computes: <>{notesConduct.whatAPassingUnit}</>,
    formulas: [
      {
        label: notesConduct.openCircuitVoltageFromA,
        set: row(
          sub(v('U'), word('oc')),
          op('='),
          sub(v('U'), word('oc,ref')),
          brackets(n(1), op('+'), v('β'), brackets(v('T'), op('−'), n(25), word(' °C'))),
          op('+'),
          sub(v('N'), v('s')),
          frac(row(v('k'), v('T')), v('q')),
          word(' ln '),
          frac(v('G'), row(n(1000), word(' W/m²'))),
        ),
      },
    ],
    sources: [notesConduct.logarithmOfTheLight, notesConduct.spreadFromAtLeast(SIBLINGS_FOR_SPREAD)],
    limits: [notesConduct.shadeOnAModule, notesConduct.underLoadTheDatasheets],
  },
];
