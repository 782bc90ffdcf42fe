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
const ratio = (x: number | null): string => (x === null ? 'not known' : x.toFixed(3));
/** Two decimals, a real minus, no minus before nothing. */
const signed = (x: number): string => {
  const text = Math.abs(x).toFixed(2);
  return x < 0 && Number(text) !== 0 ? `−${text}` : text;
};
const list = (positions: readonly number[]): string =>
  positions.length === 1 ? `position ${positions[0]}` : `positions ${positions.join(', ')}`;

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
        name: 'voltage missing, in modules',
        measured: f.modulesMissing.toFixed(2),
        would: 'a whole number',
      },
      { name: 'current over the others’', measured: ratio(f.currentRatio), would: '1.000' },
    );
  const fit = held.length > 0 ? 'fits' : found.fit;
  return {
    key: 'units_missing',
    title: 'Units in shutdown, or modules not mated',
    ...found,
    fit,
    words:
      held.length > 0
        ? `${held.length} of ${units} units say themselves that they are in shutdown: ${list(held)}.`
        : count !== null
          ? `The voltage of ${count} of ${units} modules is missing and the current is right.`
          : 'The voltage of whole modules would be missing, with the current unchanged.',
    figures,
  };
}

function bypassed(input: ExplanationInput): Explanation {
  const { signature, weak, bypassGroups } = input;
  const own = weak?.filter((w) => w.kind === 'bypassed_substring') ?? [];
  const found = bySignature(input, 'bypassed_substring');
  const f = signature?.figures;
  const figures = own.map((w) => ({
    name: `position ${w.unit + 1} over its neighbours`,
    measured: w.ratio.toFixed(3),
    would: Array.from({ length: bypassGroups - 1 }, (_, i) => ((i + 1) / bypassGroups).toFixed(3)).join(
      ' or ',
    ),
  }));
  if (f && f.modulesMissing !== null)
    figures.push({
      name: 'voltage missing, in modules',
      measured: f.modulesMissing.toFixed(2),
      would: (1 / bypassGroups).toFixed(2),
    });
  return {
    key: 'bypassed_substring',
    title: 'Bypassed cells in a module',
    fit: own.length > 0 ? 'fits' : found.fit,
    confidence: own[0]?.confidence ?? found.confidence,
    words:
      own.length > 0
        ? `${own.map((w) => w.words).join('. ')}.`
        : 'One part in three of one module’s voltage would be missing, all day, with the current unchanged.'.replace(
            'One part in three',
            `One part in ${bypassGroups}`,
          ),
    figures,
  };
}

function shade(input: ExplanationInput): Explanation {
  const azimuth = input.signature?.figures.shadeAzimuth ?? null;
  const partOfDay = input.weak?.filter((w) => w.kind === 'part_of_day') ?? [];
  const found = bySignature(input, 'shade');
  return {
    key: 'shade',
    title: 'Shade',
    fit: found.fit === 'fits' ? 'fits' : partOfDay.length > 0 ? 'partly' : found.fit,
    confidence: found.confidence,
    words:
      azimuth !== null
        ? 'It is low day after day while the sun stands in the same part of the sky, and well elsewhere.'
        : partOfDay.length > 0
          ? `Low for part of the day: ${list(partOfDay.map((w) => w.unit + 1))}.`
          : 'It would be low at the same positions of the sun, day after day, and well elsewhere.',
    figures:
      azimuth === null
        ? []
        : [
            {
              name: 'low while the sun’s azimuth is',
              measured: `${azimuth[0]}° to ${azimuth[1]}°`,
              would: 'one stretch',
            },
          ],
  };
}

function soiling(input: ExplanationInput): Explanation {
  const perDay = input.signature?.figures.driftPerDay ?? null;
  const found = bySignature(input, 'soiling');
  return {
    key: 'soiling',
    title: 'Dirt',
    ...found,
    fit: input.signature !== null && perDay === null ? 'cant_tell' : found.fit,
    words:
      found.fit === 'fits'
        ? 'It fell day by day and came back with the rain.'
        : perDay === null
          ? 'It would fall day by day and come back with rain; ten judged days are needed to see it.'
          : 'It would fall day by day and come back with rain.',
    figures:
      perDay === null
        ? []
        : [
            {
              name: 'change of the ratio a day',
              measured: `${perDay > 0 ? '+' : '−'}${(100 * Math.abs(perDay)).toFixed(2)} %`,
              would: 'under −0.10 %',
            },
          ],
  };
}

function currentLow(input: ExplanationInput): Explanation {
  const f = input.signature?.figures;
  return {
    key: 'current_low',
    title: 'Too little current, voltage right',
    ...bySignature(input, 'current_low'),
    words: 'Even dirt, modules of another kind, or a string of the input that carries nothing.',
    figures: f
      ? [
          {
            name: 'current over the others’',
            measured: ratio(f.currentRatio),
            would: `under ${(1 - UNCHANGED).toFixed(2)}`,
          },
          { name: 'voltage over the others’', measured: ratio(f.voltageRatio), would: '1.000' },
        ]
      : [],
  };
}

function resistance({ loop }: ExplanationInput): Explanation {
  const found = loop?.outcome === 'excess' || loop?.outcome === 'growing';
  return {
    key: 'loop_resistance',
    title: 'A connector or lead going bad',
    fit: loop === null || loop.outcome === 'cant_tell' ? 'cant_tell' : found ? 'fits' : 'does_not',
    confidence: found ? loop.confidence : null,
    words: loop?.words ?? 'The units’ outputs or the input’s voltage are not measured here.',
    figures:
      loop?.fit && loop.above
        ? [
            {
              name: `resistance over that of ${loop.above.comparedWith}`,
              measured: `${signed(loop.above.ohm)} Ω (${signed(loop.above.low)} to ${signed(loop.above.high)})`,
              would: `over ${loop.threshold.ohm.toFixed(1)} Ω`,
            },
          ]
        : [],
  };
}

function weakModule({ weak }: ExplanationInput): Explanation {
  const own = weak?.filter((w) => w.kind === 'low') ?? [];
  return {
    key: 'weak_unit',
    title: 'A weak module',
    fit: weak === null ? 'cant_tell' : own.length > 0 ? 'fits' : 'does_not',
    confidence: own[0]?.confidence ?? null,
    words:
      weak === null
        ? 'Too little load, or too few units that tell their voltage, to compare them.'
        : own.length > 0
          ? `${own.map((w) => w.words).join('. ')}.`
          : 'No unit stays under its neighbours’ voltage.',
    figures: own.map((w) => ({
      name: `position ${w.unit + 1} over its neighbours`,
      measured: w.ratio.toFixed(3),
      would: `under ${w.threshold.ratio.toFixed(3)}`,
    })),
  };
}
