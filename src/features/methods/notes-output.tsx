import { BAND, HEARD_MIN, NOT_STIRRED_BELOW } from '../../domain/commissioning/roll-call';
import { DAYS_LOOKED_AT, DAYS_LOW, LOSS_MIN, Z_LIMIT } from '../../domain/output/low-output';
import { DECISIVE_METHOD, ODDS_NEEDED } from '../../domain/output/membership';
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
import { OUTSIDE_ARRAY_LIMIT_V } from '../../domain/verdicts/conductors';
import { timeLimitOf } from '../../domain/verdicts/context';
import { number, percent } from '../../drawings/numbers';
import { brackets, frac, n, op, row, sub, sum, sup, v, word } from './math';
import type { Note } from './note';

/** Notes on what is concluded from days of data, and from what people do on site. */

const { timeLimitS } = timeLimitOf('rapid_shutdown_30s');

export const OUTPUT_NOTES: readonly Note[] = [
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
    key: 'weak-unit',
    title: 'A weak unit in its string',
    computes: (
      <>
        Each unit&rsquo;s voltage over the median of its string, quarter by quarter of a day under load. A
        unit that is low nearly all day is told by how much is missing: all of it (held in shutdown, not
        mated), a whole number of bypassed sub-strings, or anything else; one that is low for some hours only
        is shaded, or has a contact that comes and goes.
      </>
    ),
    formulas: [
      {
        label: 'low',
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
        label: 'k of m sub-strings bypassed',
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
    where: `σ is 1.4826 × MAD over the string's units. Nothing passes below ${percent(HELD_BELOW)}; nearly all day means ${percent(MOSTLY)} of the quarters.`,
    sources: [
      `${DEVIATIONS_UNIT} robust standard deviations: Iglewicz & Hoaglin 1993. At least ${percent(LOSS_MIN_UNIT)}: from experience.`,
      'Half a volt across a bypass diode: from experience.',
    ],
    limits: [
      `Fewer than ${UNITS_MIN} units or ${QUARTERS_MIN} quarters under load say nothing.`,
      'An optimizing unit moves its output, so its module side is looked at.',
      'Units in parallel strings are held against their own string only.',
      'Units that report nothing have no voltage of their own to look at.',
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
      { label: 'heat', set: row(v('P'), op('='), sup(v('I'), n(2)), v('R')) },
    ],
    where: `U is the mean of both ends; b takes up gain errors. ${EXCESS_OHM} Ω more than before is worth a look, if it is ${DEVIATIONS_LOOP} standard deviations as well. What ${LOOPS_MIN} or more strings show alike is the weather's and taken off.`,
    sources: ['Theil–Sen slopes: P. K. Sen, 1968.', 'Threshold: 10 W in one place at 10 A, from experience.'],
    limits: [
      'Both ends must be read at one moment. Where the input tells its current, readings whose currents disagree are left out; what is left of the tracker’s wobble makes three days good for about 0.05 Ω.',
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
          frac(row(v('E'), op('/'), sub(v('P'), n(0))), row(v('H'), op('/'), sub(v('G'), word('ref')))),
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
