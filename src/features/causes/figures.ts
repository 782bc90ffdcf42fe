import { z } from 'zod';
import { number, percent, quantity } from '../../drawings/numbers';
import { shortDate } from '../../drawings/times';
import type { CausePage } from '../../schemas/api/causes';
import { causesFigures } from '../../words/causes';
import { loopThan } from '../../words/domain-loop';

/** The figures of a finding as a list of names and values. What an older version kept differently is left out. */

export interface Figure {
  label: string;
  value: string;
}

const low = z.object({
  method: z.enum(['siblings', 'model']),
  days: z.array(z.object({ day: z.string(), ratio: z.number(), z: z.number().nullable(), low: z.boolean() })),
  threshold: z.object({ ratio: z.number(), source: z.string() }),
  loss: z.object({ share: z.number(), low: z.number(), high: z.number() }).nullable(),
  signature: z
    .object({
      figures: z.object({
        voltageRatio: z.number().nullable(),
        currentRatio: z.number().nullable(),
        modulesMissing: z.number().nullable(),
      }),
    })
    .nullable(),
});
const loop = z.object({
  fit: z
    .object({ ohm: z.number(), low: z.number(), high: z.number(), samples: z.number(), highestA: z.number() })
    .nullable(),
  above: z
    .object({ ohm: z.number(), low: z.number(), high: z.number(), comparedWith: z.string() })
    .nullable(),
  heatW: z.number().nullable(),
  threshold: z.object({ ohm: z.number(), source: z.string() }),
});
const weak = z.object({
  ratio: z.number(),
  share: z.number(),
  threshold: z.object({ ratio: z.number(), source: z.string() }),
});
const member = z.array(
  z.object({
    string: z.string(),
    position: z.number(),
    otherString: z.string().nullable(),
    apartOwn: z.number().nullable(),
    apartOther: z.number().nullable(),
    steps: z.number(),
  }),
);

export function figuresOf(cause: Pick<CausePage, 'kind' | 'figures'>): Figure[] {
  const { finding, units } = cause.figures as { finding?: unknown; units?: unknown };
  switch (cause.kind) {
    case 'low_output':
      return lowFigures(low.safeParse(finding).data);
    case 'loop_resistance':
      return loopFigures(loop.safeParse(finding).data);
    case 'weak_unit':
      return weakFigures(weak.safeParse(finding).data);
    case 'wrong_string':
      return memberFigures(member.safeParse(units).data);
    default:
      return [];
  }
}

const range = (low: number, high: number, of: (x: number) => string): string =>
  causesFigures.lowToHigh(of(low), of(high));

function lowFigures(f: z.infer<typeof low> | undefined): Figure[] {
  if (!f) return [];
  const s = f.signature?.figures;
  return [
    ...f.days.map((d) => ({
      label: shortDate(`${d.day}T12:00:00Z`, 'UTC'),
      value: causesFigures.ratioOfExpectedZ(d.ratio, d.z, d.low),
    })),
    { label: causesFigures.lowBelow, value: `${percent(f.threshold.ratio)}: ${f.threshold.source}` },
    ...(f.loss
      ? [{ label: causesFigures.missingNineTimesIn, value: range(f.loss.low, f.loss.high, percent) }]
      : []),
    ...(s?.voltageRatio == null
      ? []
      : [{ label: causesFigures.voltageOverTheOthers, value: number(s.voltageRatio, 3) }]),
    ...(s?.currentRatio == null
      ? []
      : [{ label: causesFigures.currentOverTheOthers, value: number(s.currentRatio, 3) }]),
    ...(s?.modulesMissing == null || Math.abs(s.modulesMissing) < 0.1
      ? []
      : [{ label: causesFigures.voltageMissingInModules, value: number(s.modulesMissing, 2) }]),
    {
      label: causesFigures.heldAgainst,
      value: f.method === 'siblings' ? causesFigures.theStringsOfIts : causesFigures.theModelTooFew,
    },
  ];
}

const ohm = (x: number): string => quantity(x, 'Ω', 2);
function loopFigures(f: z.infer<typeof loop> | undefined): Figure[] {
  if (!f?.fit || !f.above) return [];
  return [
    { label: causesFigures.moreThan(loopThan(f.above.comparedWith)), value: ohm(f.above.ohm) },
    { label: causesFigures.n95Sure, value: range(f.above.low, f.above.high, ohm) },
    { label: causesFigures.wholeLoop, value: ohm(f.fit.ohm) },
    { label: causesFigures.lookedAtAbove, value: `${ohm(f.threshold.ohm)}: ${f.threshold.source}` },
    ...(f.heatW === null
      ? []
      : [{ label: causesFigures.heatAt(f.fit.highestA), value: quantity(f.heatW, 'W') }]),
    { label: causesFigures.samples, value: number(f.fit.samples) },
  ];
}

const weakFigures = (f: z.infer<typeof weak> | undefined): Figure[] =>
  f
    ? [
        { label: causesFigures.voltageOverItsNeighbours, value: percent(f.ratio) },
        { label: causesFigures.shareOfTheQuarters, value: percent(f.share) },
        { label: causesFigures.weakBelow, value: `${percent(f.threshold.ratio)}: ${f.threshold.source}` },
      ]
    : [];

const memberFigures = (units: z.infer<typeof member> | undefined): Figure[] =>
  (units ?? []).flatMap((u) => [
    {
      label: causesFigures.positionOffItsOwn(u.string, u.position),
      value: u.apartOwn === null ? causesFigures.notKnown : percent(u.apartOwn, 1),
    },
    {
      label: causesFigures.positionOff(u.string, u.position, u.otherString),
      value: u.apartOther === null ? causesFigures.notKnown : percent(u.apartOther, 1),
    },
  ]);
