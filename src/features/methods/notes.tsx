import type { ReactNode } from 'react';
import { BAND, HEARD_MIN, NOT_STIRRED_BELOW } from '../../domain/commissioning/roll-call';
import { UNIT_PRESETS } from '../../domain/equipment/unit-type';
import { DAYS_LOOKED_AT, DAYS_LOW, LOSS_MIN, Z_LIMIT } from '../../domain/output/low-output';
import { DECISIVE_METHOD, ODDS_NEEDED } from '../../domain/output/membership';
import { SIBLINGS_MIN, SUN_ENOUGH } from '../../domain/output/plane-reference';
import { EXCESS_OHM } from '../../domain/output/resistance';
import { SIBLINGS_FOR_SPREAD } from '../../domain/output/expected';
import { TELL_FROM } from '../../domain/readings/interpret';
import { PRIORS } from '../../domain/readings/hypotheses';
import { AGREEING, OUTSIDE_ARRAY_LIMIT_V } from '../../domain/verdicts/conductors';
import { judgementTimes, timeLimitOf } from '../../domain/verdicts/context';
import { SILENT_AFTER_INTERVALS } from '../../domain/verdicts/judge';
import { number, percent } from '../../drawings/numbers';
import type { ExampleKey } from './examples';
import { brackets, frac, n, op, row, sub, sum, sup, v, word } from './math';

/** One judgement, as it is explained to whoever lives with it. Thresholds come from the judgement itself. */
export interface Note {
  key: ExampleKey;
  title: string;
  computes: ReactNode;
  formulas: readonly { label: string; set: ReactNode }[];
  where?: ReactNode;
  sources: readonly string[];
  limits: readonly string[];
}

const { timeLimitS } = timeLimitOf('rapid_shutdown_30s');
const MINUTELY = judgementTimes(60, timeLimitS);
const { nominal, min, max } = UNIT_PRESETS.shutdown_only.shutdownVoltage;
const over = (text: string) => word(text);

export const NOTES: readonly Note[] = [
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
          sub(v('U'), over('oc')),
          op('+'),
          v('s'),
          sub(v('U'), over('sd')),
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
          sub(v('t'), over('passing')),
          op('>'),
          sub(v('t'), over('command')),
          op('+'),
          sub(v('T'), over('limit')),
        ),
      },
      {
        label: 'stuck',
        set: row(
          sub(v('t'), over('in shutdown')),
          op('≥'),
          word('max'),
          brackets(
            sub(v('t'), over('first')),
            op(','),
            sub(v('t'), over('release')),
            op(','),
            sub(v('t'), over('change')),
            op(','),
            sub(v('t'), over('light')),
          ),
          op('+'),
          sub(v('T'), over('grace')),
        ),
      },
      {
        label: 'silent',
        set: row(
          v('t'),
          op('−'),
          sub(v('t'), over('heard')),
          op('≥'),
          n(SILENT_AFTER_INTERVALS),
          sub(v('T'), over('report')),
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
        {AGREEING.not_shutting_down} readings must agree.
      </>
    ),
    formulas: [
      {
        label: 'threshold on the home run',
        set: row(
          sub(v('U'), over('max')),
          op('='),
          word('max'),
          brackets(n(OUTSIDE_ARRAY_LIMIT_V), word(' V'), op(','), n(2), v('n'), sub(v('U'), over('sd,max'))),
        ),
      },
    ],
    sources: [
      `${OUTSIDE_ARRAY_LIMIT_V} V outside the array boundary: NEC 690.12(B)(1).`,
      'Twice the units’ highest shutdown voltage: our own rule.',
    ],
    limits: [
      `An inverter's capacitors hold the home run up: nothing is said for ${MINUTELY.capacitorHoldS} s after the limit.`,
      'Strings that share an input share its voltage: which of them it is can not be told.',
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
          sum(over('show it')),
          brackets(sub(v('c'), over('alone')), op('−'), sub(v('c'), over('shows'))),
          op('−'),
          sum(over('do not')),
          sub(v('c'), over('spares')),
          op('−'),
          sub(v('c'), over('part')),
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
          sub(v('U'), over('oc')),
          op('='),
          sub(v('U'), over('oc,ref')),
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
  {
    key: 'low-output',
    title: 'Low output',
    computes: (
      <>
        Each day&rsquo;s specific yield of a string over that of its plane. Clipping, curtailment, grid loss,
        commanded shutdown and gaps are taken out first. Low on {DAYS_LOW} of {DAYS_LOOKED_AT} days with
        enough sun makes a finding; then the shape of the loss is looked at.
      </>
    ),
    formulas: [
      {
        label: 'modified z-score',
        set: row(
          v('z'),
          op('='),
          frac(row(n(0.6745), brackets(v('x'), op('−'), word('median'))), word('MAD')),
          op('<'),
          n(-Z_LIMIT),
        ),
      },
    ],
    where: `and at least ${percent(LOSS_MIN)} below its siblings. A day counts from ${SUN_ENOUGH} kWh/kWp on.`,
    sources: [
      `|z| > ${Z_LIMIT}: Iglewicz & Hoaglin 1993.`,
      `${percent(LOSS_MIN)} between strings: IEC 62446-1.`,
    ],
    limits: [
      `Fewer than ${SIBLINGS_MIN} strings in a plane: the datasheet model stands in, with a wide band.`,
      'Where strings share an input, their sum is judged.',
      'What all strings of a plane lose alike does not show here.',
    ],
  },
  {
    key: 'membership',
    title: 'Wrong place on the drawing',
    computes: (
      <>
        Units in series carry one current. A unit whose current differs from its own string&rsquo;s and agrees
        with another&rsquo;s sits in that other string. Differences against the units&rsquo; accuracy count,
        not correlation: under a clear sky all strings correlate.
      </>
    ),
    formulas: [
      {
        label: 'odds needed',
        set: row(
          word('ln '),
          frac(
            row(v('P'), brackets(v('I'), op('|'), word('other string'))),
            row(v('P'), brackets(v('I'), op('|'), word('own string'))),
          ),
          op('≥'),
          n(number(ODDS_NEEDED, 1)),
        ),
      },
    ],
    sources: [
      'Currents in series are equal: Kirchhoff.',
      'A wrong place is taken to be one in a thousand: from experience.',
    ],
    limits: [
      'Names the other string, never the position.',
      'Before the inverter runs there is nothing to tell from.',
      DECISIVE_METHOD,
    ],
  },
  {
    key: 'resistance',
    title: 'A connector going bad',
    computes: (
      <>
        Between the units and the inverter input voltage is lost in proportion to the current. A robust fit
        finds the resistance; growth against its own past, or more than like strings have, is heat in one
        place.
      </>
    ),
    formulas: [
      {
        label: 'loop of a string',
        set: row(
          sum(v('i')),
          sub(v('U'), v('i')),
          op('−'),
          sub(v('U'), over('input')),
          op('='),
          v('a'),
          op('+'),
          v('b'),
          sub(v('U'), over('input')),
          op('+'),
          v('R'),
          v('I'),
        ),
      },
      { label: 'heat', set: row(v('P'), op('='), sup(v('I'), n(2)), v('R')) },
    ],
    where: `b takes up gain errors. ${EXCESS_OHM} Ω more than before is worth a look.`,
    sources: ['Theil–Sen slopes: P. K. Sen, 1968.', 'Threshold: 10 W in one place at 10 A, from experience.'],
    limits: [
      'Connectors between a module and its unit lie outside this loop: no finding is not proof.',
      'A cable is told from a connector only by growth or by like strings.',
    ],
  },
  {
    key: 'shutdown-test',
    title: 'The shutdown test',
    computes: (
      <>
        A pass needs a rated instrument at the inverter end of the home run: + to −, + to earth and − to
        earth, within the time of the rule set. Reports alone can only be consistent with a shutdown.
      </>
    ),
    formulas: [
      {
        label: 'pass of a string',
        set: row(
          word('max'),
          brackets(
            op('|'),
            sub(v('U'), over('+−')),
            op('|'),
            op(','),
            op('|'),
            sub(v('U'), over('+e')),
            op('|'),
            op(','),
            op('|'),
            sub(v('U'), over('−e')),
            op('|'),
          ),
          op('≤'),
          n(OUTSIDE_ARRAY_LIMIT_V),
          word(' V  at  '),
          v('t'),
          op('≤'),
          n(timeLimitS),
          word(' s'),
        ),
      },
    ],
    sources: [
      `${OUTSIDE_ARRAY_LIMIT_V} V within ${timeLimitS} s: NEC 690.12(B)(1), 2017 and later editions.`,
    ],
    limits: [
      'A result speaks of the day of the test.',
      'Without light that powers the units a dead string proves nothing.',
      'With several transmitters each must be taken off alone once.',
    ],
  },
  {
    key: 'roll-call',
    title: 'The forecast of a roll call',
    computes: (
      <>
        How many of the units not yet heard will still answer, and by when. Strings, gateways and blocks of
        serials of which not one has stirred, though others long have, are named and left out.
      </>
    ),
    formulas: [
      {
        label: 'not yet heard after a time',
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
    where: `ν never answer. The band holds the middle ${percent(BAND)}; a group counts as not stirred below a chance of ${percent(NOT_STIRRED_BELOW)}.`,
    sources: [
      'Cure model: Boag 1949; Berkson & Gage 1952. Weighed on a grid by Bayes, priors from experience.',
    ],
    limits: [
      `Fewer than ${HEARD_MIN} heard say nothing of the rest.`,
      'Until the roll call is complete every string is to be treated as live.',
    ],
  },
  {
    key: 'yields',
    title: 'Yields and the performance ratio',
    computes: (
      <>
        What the plant made over what the light on its planes would have made at rated power, with the
        completeness beside each figure.
      </>
    ),
    formulas: [
      {
        label: 'performance ratio',
        set: row(
          word('PR'),
          op('='),
          frac(sub(v('Y'), v('f')), sub(v('Y'), v('r'))),
          op('='),
          frac(row(v('E'), op('/'), sub(v('P'), n(0))), row(v('H'), op('/'), sub(v('G'), over('ref')))),
        ),
      },
    ],
    where: 'The corrected ratio weighs each interval of the denominator by 1 + γ (T − 25 °C).',
    sources: ['IEC 61724-1:2017, clause 10.'],
    limits: [
      'An interval counts only if it has both light and power.',
      'Says nothing of why a ratio is low.',
    ],
  },
];
