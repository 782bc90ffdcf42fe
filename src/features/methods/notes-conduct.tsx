import { UNIT_PRESETS } from '../../domain/equipment/unit-type';
import { SIBLINGS_FOR_SPREAD } from '../../domain/output/expected';
import { PRIORS } from '../../domain/readings/hypotheses';
import { TELL_FROM } from '../../domain/readings/interpret';
import {
  AGREEING,
  DEVIATIONS,
  INPUTS_DIFFER,
  OUTSIDE_ARRAY_LIMIT_V,
  STEADY_DEVIATIONS,
  STEADY_S,
} from '../../domain/verdicts/conductors';
import { judgementTimes, timeLimitOf } from '../../domain/verdicts/context';
import { SILENT_AFTER_INTERVALS } from '../../domain/verdicts/judge';
import { percent } from '../../drawings/numbers';
import { brackets, frac, n, op, row, sub, sum, v, word } from './math';
import type { Note } from './note';

/** Notes on what is concluded from one moment: readings, claims, conductors, causes, the expected voltage. */

const { timeLimitS } = timeLimitOf('rapid_shutdown_30s');
const MINUTELY = judgementTimes(60, timeLimitS);
const { nominal, min, max } = UNIT_PRESETS.shutdown_only.shutdownVoltage;

export const CONDUCT_NOTES: readonly Note[] = [
  {
    key: 'reading',
    title: 'What a meter reading means',
    computes: (
      <>
        Every way in which the string can be (all in shutdown, some passing, a module not mated, reversed, an
        open lead and more) foretells a voltage and its uncertainty. The reading weighs them by Bayes. From a
        chance of {percent(TELL_FROM)} on an explanation is named as the finding; below that we say
        &ldquo;can&rsquo;t tell&rdquo; and show what fits.
      </>
    ),
    formulas: [
      {
        label: 'chance of an explanation',
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
        label: 'voltage that an explanation foretells',
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
    where: `p units pass their module's open-circuit voltage, s are in shutdown at ${nominal} V (${min} to ${max} V by the preset). A string that is as it should be starts at ${percent(PRIORS.asExpected)}.`,
    sources: [
      `${nominal} V a unit in shutdown: common practice. Its spread and all starting chances: from experience.`,
      'Open-circuit voltage from the datasheet (see the expected voltage below).',
      'Tolerance of the sheet ±3 %: as sheets state by IEC 61215.',
    ],
    limits: [
      'One reading of a string in shutdown often fits two explanations: one unit is worth little more than the tolerance of all.',
      'The type of unit, the count and what is commanded are taken as entered.',
      'At night and under snow a low reading proves nothing.',
      'Readings to earth that add up to the string’s are a fault; its place is told only where all modules give like voltages.',
    ],
  },
  {
    key: 'verdict',
    title: 'State and verdict of a unit',
    computes: (
      <>
        The state (passing, in shutdown, silent, dark, not heard) is the unit&rsquo;s own claim unless a
        voltage measured on its conductors contradicts it. The verdict holds it against what is commanded:
        stuck, not shutting down, late, flapping, or unconfirmed where nothing shows what it did.
      </>
    ),
    formulas: [
      {
        label: 'not shutting down',
        set: row(
          sub(v('t'), word('passing')),
          op('>'),
          sub(v('t'), word('command')),
          op('+'),
          sub(v('T'), word('limit')),
        ),
      },
      {
        label: 'stuck',
        set: row(
          sub(v('t'), word('in shutdown')),
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
        label: 'silent',
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
    where: `With reports every 60 s the grace is ${MINUTELY.graceS} s. ${MINUTELY.flapChanges} changes within ${MINUTELY.flapWindowS / 60} min that no command explains are flapping.`,
    sources: [
      `Time limit ${timeLimitS} s: ${timeLimitOf('rapid_shutdown_30s').source}. ${timeLimitOf('rapid_shutdown_10s').timeLimitS} s: ${timeLimitOf('rapid_shutdown_10s').source}.`,
      'Grace, silence and flapping: settings, from experience.',
    ],
    limits: [
      'A claim is only a claim: an output inferred from it is drawn dashed and called assumed.',
      'Reports come at intervals, so the time to shutdown is an interval too.',
      'While shutdown is commanded, a unit that says nothing is never taken to be in order.',
    ],
  },
  {
    key: 'conductors',
    title: 'What the conductors say against the claims',
    computes: (
      <>
        The voltage of an inverter input is held against what the units of its strings claim. If it stays up
        though all claim shutdown, the string is not shutting down, position unknown.{' '}
        {AGREEING.not_shutting_down} readings must agree. While released, the units&rsquo; outputs must add up
        to the input; where units tell nothing, the missing voltage says how many are held.
      </>
    ),
    formulas: [
      {
        label: 'threshold on the home run',
        set: row(
          sub(v('U'), word('max')),
          op('='),
          word('max'),
          brackets(n(OUTSIDE_ARRAY_LIMIT_V), word(' V'), op(','), n(2), v('n'), sub(v('U'), word('sd,max'))),
        ),
      },
      {
        label: 'outputs against the input, released',
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
        label: 'held units of a silent string',
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
    where: `Held units are counted where they miss six tenths of a module or ${STEADY_DEVIATIONS} standard deviations for ${STEADY_S / 3600} h, for a shadow moves on. Inputs of one inverter are taken to differ by ${percent(INPUTS_DIFFER, 1)} a module.`,
    sources: [
      `${OUTSIDE_ARRAY_LIMIT_V} V outside the array boundary: NEC 690.12(B)(1).`,
      'Twice the units’ highest shutdown voltage: our own rule.',
    ],
    limits: [
      `An inverter's capacitors hold the home run up: nothing is said for ${MINUTELY.capacitorHoldS} s after the limit.`,
      'Strings that share an input share its voltage: which of them it is can not be told, and a held unit in one of silent strings shows as current only.',
      'Units that measure their module only: their outputs are what they claim. One of more than about fourteen is within the input’s own accuracy.',
      'A shadow that stays two hours on as many modules reads like held units. Without other strings on the inverter one held unit of many is within what a datasheet foretells.',
      'Inverters read a few volts badly. A low figure is no witness of a shutdown.',
    ],
  },
  {
    key: 'causes',
    title: 'Causes',
    computes: (
      <>
        The smallest set of shared parts (gateway, transmitter, string, inverter input, logger, zone) that
        explains the abnormal units. What a rival explains as well is kept beside it.
      </>
    ),
    formulas: [
      {
        label: 'gain of an explanation',
        set: row(
          v('G'),
          op('='),
          sum(word('show it')),
          brackets(sub(v('c'), word('alone')), op('−'), sub(v('c'), word('shows'))),
          op('−'),
          sum(word('do not')),
          sub(v('c'), word('spares')),
          op('−'),
          sub(v('c'), word('part')),
        ),
      },
    ],
    where:
      'c are costs, −ln of a probability. The part with the greatest gain is taken first, then the rest again.',
    sources: [
      'Greedy cover: V. Chvátal, 1979.',
      'Costs of failures: from experience. They rank explanations and are no statistics.',
    ],
    limits: [
      'Inferred from afar: only a look at the part decides.',
      'Parts that the as-built does not name can not be found.',
    ],
  },
  {
    key: 'expected',
    title: 'The expected voltage',
    computes: (
      <>
        What a passing unit should give now, from the most direct source there is: like strings of the plane,
        the string&rsquo;s own passing units, the datasheet under measured light, the datasheet under a clear
        sky.
      </>
    ),
    formulas: [
      {
        label: 'open-circuit voltage from a datasheet',
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
    sources: [
      'Logarithm of the light: the diode equation. Cell temperature without a sensor: NOCT.',
      `Spread from at least ${SIBLINGS_FOR_SPREAD} siblings: 1.4826 × MAD (Iglewicz & Hoaglin 1993). Otherwise fixed and wide, from experience.`,
    ],
    limits: [
      'Shade on a module is not foreseen.',
      'Under load the datasheet’s ratio of working to open-circuit voltage is taken as constant.',
    ],
  },
];
