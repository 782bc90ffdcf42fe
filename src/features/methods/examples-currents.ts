import { judgeMembership, type MemberString, type MembershipOutcome } from '../../domain/output/membership';
import { fitLoop, judgeLoop, type LoopSample } from '../../domain/output/resistance';
import { UNITS_MIN, weakUnits, type WeakUnit } from '../../domain/output/weak-unit';
import { number, percent, quantity } from '../../drawings/numbers';
import type { Example } from './example';
import { loopThan } from '../../words/domain-loop';
import { examplesCurrents } from '../../words/method-examples';

const SAMPLES = 96;
/** Current of a string through a day with clouds, A. */
const dayCurrent = (k: number): number =>
  9 * Math.sin((Math.PI * (k + 0.5)) / SAMPLES) * (0.8 + 0.2 * Math.cos(k * 1.7));
/** A small unrest that repeats itself exactly: an example must not change by itself. */
const unrest = (k: number, phase: number): number => Math.sin(k * 2.399 + phase * 1.3);

const OUTCOMES: Record<MembershipOutcome, string> = {
  here: examplesCurrents.itSitsWhereThe,
  elsewhere: examplesCurrents.itCarriesTheCurrent,
  cant_tell: examplesCurrents.cantTell,
  fits_none: examplesCurrents.itsCurrentFitsNo,
};

export const membershipExample: Example = {
  inputs: [
    {
      kind: 'number',
      key: 'apart',
      label: examplesCurrents.stringsDifferInCurrent,
      unit: '%',
      min: 0,
      max: 50,
      start: 12,
    },
    {
      kind: 'number',
      key: 'accuracy',
      label: examplesCurrents.accuracyOfTheUnits,
      unit: '%',
      min: 0.1,
      max: 10,
      start: 1,
    },
    {
      kind: 'choice',
      key: 'wired',
      label: examplesCurrents.unit1OfA1,
      options: [
        { value: 'A2', label: 'A2' },
        { value: 'A1', label: 'A1' },
      ],
      start: 'A2',
    },
  ],
  answer: ({ number: n, choice }) => {
    const apart = n('apart') / 100;
    const accuracy = n('accuracy') / 100;
    // the lead changes over the day, as cloud and a different tilt make it
    const other = (k: number): number => dayCurrent(k) * (1 + apart * (0.75 + 0.25 * Math.sin(k / 9)));
    const unit = (of: (k: number) => number, id: number): Float64Array =>
      Float64Array.from(
        { length: SAMPLES },
        (_, k) => of(k) * (1 + 0.8 * accuracy * unrest(id, 3)) * (1 + 0.002 * unrest(k, id)),
      );
    const strings: MemberString[] = [
      {
        name: 'A1',
        currents: Array.from({ length: 8 }, (_, i) =>
          unit(i === 0 && choice('wired') === 'A2' ? other : dayCurrent, i + 1),
        ),
      },
      { name: 'A2', currents: Array.from({ length: 8 }, (_, i) => unit(other, i + 21)) },
    ];
    const judged = judgeMembership(strings, { accuracy }).find((m) => m.string === 'A1' && m.unit === 0);
    if (!judged) throw new RangeError(examplesCurrents.theJudgementLeftUnit);
    return {
      finding: judged.otherString
        ? `${OUTCOMES[judged.outcome]}: ${judged.otherString}`
        : OUTCOMES[judged.outcome],
      figures: [
        { label: examplesCurrents.inWords, value: judged.words },
        { label: examplesCurrents.lnOfTheOdds, value: number(judged.logOdds, 1) },
        { label: examplesCurrents.canNotBeParted, value: judged.undecidedWith.join(', ') || '–' },
      ],
    };
  },
};

export const resistanceExample: Example = {
  inputs: [
    {
      kind: 'number',
      key: 'now',
      label: examplesCurrents.resistanceOfTheLoop,
      unit: 'Ω',
      min: 0,
      max: 5,
      start: 0.65,
    },
    {
      kind: 'number',
      key: 'past',
      label: examplesCurrents.whenAllWasIn,
      unit: 'Ω',
      min: 0,
      max: 5,
      start: 0.4,
    },
    {
      kind: 'number',
      key: 'gain',
      label: examplesCurrents.gainErrorOfThe,
      unit: '%',
      min: -1.5,
      max: 1.5,
      start: 0.8,
    },
  ],
  answer: ({ number: n }) => {
    const samples = (ohm: number): LoopSample[] =>
      Array.from({ length: 120 }, (_, k) => {
        const ownA = 2 + 8 * Math.sin((Math.PI * (k + 0.5)) / 120);
        const sumV = 440 + 9 * unrest(k, 1);
        return {
          atS: k * 300,
          sumV: sumV + 0.15 * unrest(k, 2),
          inputV: (sumV - ohm * ownA) * (1 + n('gain') / 100),
          ownA,
          othersA: 0,
        };
      });
    const past = fitLoop(samples(n('past')));
    const finding = judgeLoop(fitLoop(samples(n('now'))), {
      past: typeof past === 'string' ? null : past,
      siblings: [],
      cableOhm: n('past'),
    });
    return {
      finding: finding.words,
      figures: [
        {
          label: examplesCurrents.fittedNowWith95,
          value: finding.fit
            ? examplesCurrents.ohmLowToHigh(finding.fit.ohm, finding.fit.low, finding.fit.high)
            : '–',
        },
        {
          label: examplesCurrents.moreThan(finding.above ? loopThan(finding.above.comparedWith) : undefined),
          value: finding.above ? quantity(finding.above.ohm, 'Ω', 2) : '–',
        },
        {
          label: examplesCurrents.threshold,
          value: `${quantity(finding.threshold.ohm, 'Ω', 2)}; ${finding.threshold.source}`,
        },
      ],
    };
  },
};

const KINDS: Record<WeakUnit['kind'], string> = {
  held: examplesCurrents.passesNothing,
  bypassed_substring: examplesCurrents.bypassedCells,
  part_of_day: examplesCurrents.lowForPartOf,
  low: examplesCurrents.lowAllDay,
};
const QUARTERS = 40;

export const weakUnitExample: Example = {
  inputs: [
    {
      kind: 'number',
      key: 'units',
      label: examplesCurrents.unitsOfTheString,
      min: 1,
      max: 63,
      whole: true,
      start: 14,
    },
    {
      kind: 'number',
      key: 'volts',
      label: examplesCurrents.unit5GivesWhere,
      unit: 'V',
      min: -1,
      max: 34,
      start: 22.3,
    },
    {
      kind: 'number',
      key: 'hours',
      label: examplesCurrents.inSoManyOf,
      unit: 'h',
      min: 0,
      max: 10,
      start: 10,
    },
    {
      kind: 'choice',
      key: 'groups',
      label: examplesCurrents.bypassDiodesOfA,
      options: [
        { value: '3', label: '3' },
        { value: '2', label: '2' },
      ],
      start: '3',
    },
  ],
  answer: ({ number: n, choice }) => {
    const units = n('units');
    const from = (QUARTERS - 4 * n('hours')) / 2;
    const voltage = Array.from({ length: units }, (_, u) =>
      Float64Array.from({ length: QUARTERS }, (_q, q) =>
        u === 4 && q + 0.5 >= from && q + 0.5 < QUARTERS - from
          ? n('volts') + 0.1 * unrest(q, u)
          : 34 + 0.15 * unrest(u, 2) + 0.1 * unrest(q, u),
      ),
    );
    const found = weakUnits({
      voltage,
      current: new Float64Array(QUARTERS).fill(7),
      bypassGroups: Number(choice('groups')),
    });
    const [weak] = found;
    if (!weak)
      return {
        finding:
          units < UNITS_MIN ? examplesCurrents.cantTellUnitsAre(UNITS_MIN) : examplesCurrents.noUnitOfThe,
        figures: [],
      };
    return {
      finding: weak.words,
      figures: [
        { label: examplesCurrents.whatItLooksLike, value: KINDS[weak.kind] },
        { label: examplesCurrents.itsVoltageOverIts, value: percent(weak.ratio, 1) },
        { label: examplesCurrents.inThatShareOf, value: percent(weak.share) },
        { label: examplesCurrents.lowBelow, value: percent(weak.threshold.ratio, 1) },
        { label: examplesCurrents.itCouldAlsoBe, value: weak.couldBe.join('; ') },
      ],
    };
  },
};
