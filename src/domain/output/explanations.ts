import {
  explanationFigures as figure,
  explanationSaid as said,
  explanationTitles,
} from '../../words/domain-explanations';
import { loopComparedWith } from '../../words/domain-loop';
import type { LoopFinding } from './resistance';
import type { Signature } from './signature';
import type { WeakUnit } from './weak-unit';

/** Which explanation of a low string fits: each held against the same figures, those that do not fit too. */

export interface Explanation {
  key:
    | 'units_missing'
    | 'bypassed_substring'
    | 'shade'
    | 'soiling'
    | 'current_low'
    | 'loop_resistance'
    | 'weak_unit';
  title: string;
  fit: 'fits' | 'partly' | 'does_not' | 'cant_tell';
  words: string;
  figures: { name: string; measured: string; would: string }[];
  /** 0 … 1, only where a judgement gave one. */
  confidence: number | null;
}

export interface ExplanationInput {
  /** What the newest judged day found; null: none was judged. */
  outcome: 'low' | 'as_expected' | 'cant_tell' | null;
  /** Of a low string. */
  signature: Signature | null;
  units: number;
  bypassGroups: number;
  loop: LoopFinding | null;
  /** null: too little load or company to tell. */
  weak: readonly WeakUnit[] | null;
  /** Positions that are in shutdown while released. */
  held: readonly number[];
}

/** How far a ratio may be off and still count as unchanged: as the signature has it. */
const UNCHANGED = 0.03;
const ratio = (x: number | null): string => (x === null ? figure.notKnown : x.toFixed(3));
/** Two decimals, a real minus, no minus before nothing. */
const signed = (x: number): string => {
  const text = Math.abs(x).toFixed(2);
  return x < 0 && Number(text) !== 0 ? `−${text}` : text;
};

/** The likeliest first: what fits, then what fits partly, what can't be told, what doesn't. */
const RANK: Record<Explanation['fit'], number> = { fits: 0, partly: 1, cant_tell: 2, does_not: 3 };

export function explanationsOf(input: ExplanationInput): Explanation[] {
  const all = [
    unitsMissing(input),
    bypassed(input),
    shade(input),
    soiling(input),
    currentLow(input),
    resistance(input),
    weakModule(input),
  ];
  return all
    .map((e, i) => ({ e, i }))
    .sort(
      (a, b) => RANK[a.e.fit] - RANK[b.e.fit] || (b.e.confidence ?? 0) - (a.e.confidence ?? 0) || a.i - b.i,
    )
    .map(({ e }) => e);
}

/** Whether a signature of that kind was found; where nothing is low there is nothing to explain. */
function bySignature(
  { signature, outcome }: ExplanationInput,
  kind: Signature['kind'],
): Pick<Explanation, 'fit' | 'confidence'> {
  if (signature === null)
    return { fit: outcome === 'as_expected' ? 'does_not' : 'cant_tell', confidence: null };
  return signature.kind === kind
    ? { fit: 'fits', confidence: signature.confidence }
    : { fit: 'does_not', confidence: null };
}

function unitsMissing(input: ExplanationInput): Explanation {
  const { signature, held, units } = input;
  const f = signature?.figures;
  const found = bySignature(input, 'units_missing');
  const count = signature?.kind === 'units_missing' ? signature.count : null;
  const figures = [];
  if (f && f.modulesMissing !== null)
    figures.push(
      {
        name: figure.voltageMissing,
        measured: f.modulesMissing.toFixed(2),
        would: figure.wholeNumber,
      },
      { name: figure.currentOverTheOthers, measured: ratio(f.currentRatio), would: '1.000' },
    );
  const fit = held.length > 0 ? 'fits' : found.fit;
  return {
    key: 'units_missing',
    title: explanationTitles.units_missing,
    ...found,
    fit,
    words:
      held.length > 0
        ? said.sayItThemselves(held, units)
        : count !== null
          ? said.voltageMissing(count, units)
          : said.voltageWouldBeMissing,
    figures,
  };
}

function bypassed(input: ExplanationInput): Explanation {
  const { signature, weak, bypassGroups } = input;
  const own = weak?.filter((w) => w.kind === 'bypassed_substring') ?? [];
  const found = bySignature(input, 'bypassed_substring');
  const f = signature?.figures;
  const figures = own.map((w) => ({
    name: figure.positionOverNeighbours(w.unit + 1),
    measured: w.ratio.toFixed(3),
    would: figure.oneOf(
      Array.from({ length: bypassGroups - 1 }, (_, i) => ((i + 1) / bypassGroups).toFixed(3)),
    ),
  }));
  if (f && f.modulesMissing !== null)
    figures.push({
      name: figure.voltageMissing,
      measured: f.modulesMissing.toFixed(2),
      would: (1 / bypassGroups).toFixed(2),
    });
  return {
    key: 'bypassed_substring',
    title: explanationTitles.bypassed_substring,
    fit: own.length > 0 ? 'fits' : found.fit,
    confidence: own[0]?.confidence ?? found.confidence,
    words: own.length > 0 ? said.ofUnits(own.map((w) => w.words)) : said.partWouldBeMissing(bypassGroups),
    figures,
  };
}

function shade(input: ExplanationInput): Explanation {
  const azimuth = input.signature?.figures.shadeAzimuth ?? null;
  const partOfDay = input.weak?.filter((w) => w.kind === 'part_of_day') ?? [];
  const found = bySignature(input, 'shade');
  return {
    key: 'shade',
    title: explanationTitles.shade,
    fit: found.fit === 'fits' ? 'fits' : partOfDay.length > 0 ? 'partly' : found.fit,
    confidence: found.confidence,
    words:
      azimuth !== null
        ? said.shade
        : partOfDay.length > 0
          ? said.lowForPartOfTheDay(partOfDay.map((w) => w.unit + 1))
          : said.shadeWouldBe,
    figures:
      azimuth === null
        ? []
        : [
            {
              name: figure.lowWhileAzimuth,
              measured: figure.degrees(azimuth[0], azimuth[1]),
              would: figure.oneStretch,
            },
          ],
  };
}

function soiling(input: ExplanationInput): Explanation {
  const perDay = input.signature?.figures.driftPerDay ?? null;
  const found = bySignature(input, 'soiling');
  return {
    key: 'soiling',
    title: explanationTitles.soiling,
    ...found,
    fit: input.signature !== null && perDay === null ? 'cant_tell' : found.fit,
    words:
      found.fit === 'fits' ? said.soiling : perDay === null ? said.soilingTooFewDays : said.soilingWouldBe,
    figures:
      perDay === null
        ? []
        : [
            {
              name: figure.changeADay,
              measured: `${perDay > 0 ? '+' : '−'}${(100 * Math.abs(perDay)).toFixed(2)} %`,
              would: figure.under('−0.10 %'),
            },
          ],
  };
}

function currentLow(input: ExplanationInput): Explanation {
  const f = input.signature?.figures;
  return {
    key: 'current_low',
    title: explanationTitles.current_low,
    ...bySignature(input, 'current_low'),
    words: said.currentLow,
    figures: f
      ? [
          {
            name: figure.currentOverTheOthers,
            measured: ratio(f.currentRatio),
            would: figure.under((1 - UNCHANGED).toFixed(2)),
          },
          { name: figure.voltageOverTheOthers, measured: ratio(f.voltageRatio), would: '1.000' },
        ]
      : [],
  };
}

function resistance({ loop }: ExplanationInput): Explanation {
  const found = loop?.outcome === 'excess' || loop?.outcome === 'growing';
  return {
    key: 'loop_resistance',
    title: explanationTitles.loop_resistance,
    fit: loop === null || loop.outcome === 'cant_tell' ? 'cant_tell' : found ? 'fits' : 'does_not',
    confidence: found ? loop.confidence : null,
    words: loop?.words ?? said.loopNotMeasured,
    figures:
      loop?.fit && loop.above
        ? [
            {
              name: figure.resistanceOver(loopComparedWith[loop.above.comparedWith]),
              measured: figure.ohm(signed(loop.above.ohm), signed(loop.above.low), signed(loop.above.high)),
              would: figure.over(`${loop.threshold.ohm.toFixed(1)} Ω`),
            },
          ]
        : [],
  };
}

function weakModule({ weak }: ExplanationInput): Explanation {
  const own = weak?.filter((w) => w.kind === 'low') ?? [];
  return {
    key: 'weak_unit',
    title: explanationTitles.weak_unit,
    fit: weak === null ? 'cant_tell' : own.length > 0 ? 'fits' : 'does_not',
    confidence: own[0]?.confidence ?? null,
    words:
      weak === null
        ? said.tooLittleToCompare
        : own.length > 0
          ? said.ofUnits(own.map((w) => w.words))
          : said.noneUnderItsNeighbours,
    figures: own.map((w) => ({
      name: figure.positionOverNeighbours(w.unit + 1),
      measured: w.ratio.toFixed(3),
      would: figure.under(w.threshold.ratio.toFixed(3)),
    })),
  };
}
