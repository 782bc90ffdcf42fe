import {
  BOTH_SIDES,
  HOLDING,
  OPTIMIZING,
  OUTPUT_SIDE,
  SHUTDOWN_ONLY,
} from '../../../simulator/scenarios/catalogue';
import type { Fault } from '../../../simulator/faults/kinds';
import { DAY_S, Draw, drawPlant, type DrawnPlant, type TimedFault } from './plants';

/** What is wrong with the output of a plant over several days. */

export type OutputFault = Extract<
  Fault,
  { kind: 'soiling' | 'shade' | 'stuck' | 'bypass_diode' | 'connector' | 'wrong_string' }
>;

export interface OutputRun {
  drawn: DrawnPlant;
  days: number;
  /** First day on which the faults are there; the days before are sound. 0: they were always there. */
  onsetDay: number;
  faults: TimedFault[];
  /** Of the same, by string. */
  ofString: Map<string, OutputFault>;
  swaps: Extract<Fault, { kind: 'wrong_string' }>[];
  /** Snow on the whole roof, and what of it stays on single strings for the rest of the day. */
  snow: TimedFault[];
  /** Steps in which nothing comes through; `keeps`: the logger hands them over afterwards. */
  cutOff: { fromStep: number; toStep: number; keeps: boolean } | null;
  /** Share of frames lost. */
  lost: number;
  /** Seconds by which the inverter's readings are older than the units'. */
  inverterLagS: number;
}

export const RUN_DAYS = 10;
/** Reports come every five minutes. */
export const STEP_S = 300;
export const STEPS_A_DAY = DAY_S / STEP_S;
const SIZES = [3, 4, 6, 6, 7, 8, 9, 10, 12, 30];
const TYPES = [OUTPUT_SIDE, BOTH_SIDES, HOLDING, OPTIMIZING, OUTPUT_SIDE, SHUTDOWN_ONLY];
const KINDS = [
  'soiling',
  'stuck',
  'bypass_diode',
  'connector',
  'shade',
  'connector',
  'bypass_diode',
  'limit',
  'stuck',
] as const;
/** Losses next to the one that is to be found. */
const LIMIT_CASE = { least: 0.085, most: 0.105 } as const;

/** Draws run `n`: ten days of one site. */
export function outputRun(n: number): OutputRun {
  const draw = new Draw(3_000_000 + n);
  const strings = SIZES[n % SIZES.length]!;
  const unitType = TYPES[n % TYPES.length]!;
  const mayShare = unitType !== SHUTDOWN_ONLY;
  const drawn = drawPlant(
    {
      n: 10_000 + n,
      unitType,
      strings,
      units: strings >= 30 ? [18, 20] : [12, 20],
      perInput: mayShare && n % 4 === 1 ? 2 : 1,
      reportIntervalS: 300,
      twoZones: false,
      gateways: 2,
      obstacle: n % 5 === 2,
      days: RUN_DAYS,
    },
    draw,
  );
  const { plan, fromS } = drawn;
  const onsetDay = n % 3 === 2 ? 0 : 4;
  const onsetS = fromS + onsetDay * DAY_S;
  const sound = n % 6 === 5;
  const faults: TimedFault[] = [];
  const ofString = new Map<string, OutputFault>();
  const swaps: OutputRun['swaps'] = [];
  const put = (fault: OutputFault): void => void faults.push({ fault, fromS: onsetS, toS: null });
  if (!sound) {
    const count = Math.max(1, Math.floor(strings / 3.5));
    draw.some(plan.strings, count).forEach((s, k) => {
      const kind = KINDS[(3 * n + k) % KINDS.length]!;
      const position = draw.whole(1, s.slots.length);
      const fault: OutputFault =
        kind === 'soiling' || kind === 'limit'
          ? { kind: 'soiling', string: s.name, share: soiledShare(draw, kind) }
          : kind === 'shade'
            ? shadeOf(draw, s.name, s.slots.length)
            : kind === 'connector'
              ? { kind, string: s.name, ohm: 0.2 }
              : kind === 'bypass_diode'
                ? { kind, string: s.name, position, groups: 1 }
                : { kind, string: s.name, position, at: 'now' };
      ofString.set(s.name, fault);
      put(fault);
      // two units of one string: enough to be called low
      if (fault.kind === 'stuck' && draw.next() < 0.7)
        put({ ...fault, position: (fault.position % s.slots.length) + 1 });
    });
    const free = plan.strings.filter((s) => !ofString.has(s.name));
    if (unitType !== SHUTDOWN_ONLY && free.length >= 2) {
      const [one, other] = draw.some(free, 2);
      const swap = {
        kind: 'wrong_string' as const,
        string: one!.name,
        position: draw.whole(1, one!.slots.length),
        otherString: other!.name,
        otherPosition: draw.whole(1, other!.slots.length),
      };
      swaps.push(swap);
      faults.push({ fault: swap, fromS: fromS - DAY_S, toS: null });
    }
  }
  const snow = n % 7 === 3 ? snowOf(draw, plan, fromS) : [];
  return {
    drawn,
    days: RUN_DAYS,
    snow,
    cutOff: cutOffOf(draw),
    onsetDay,
    faults,
    ofString,
    swaps,
    lost: draw.oneOf([0, 0.01, 0.03]),
    inverterLagS: draw.oneOf([0, 5, 10, 20]),
  };
}

const soiledShare = (draw: Draw, kind: 'soiling' | 'limit'): number =>
  kind === 'limit'
    ? LIMIT_CASE.least + (LIMIT_CASE.most - LIMIT_CASE.least) * draw.next()
    : 0.09 + 0.2 * draw.next();

/** Two snowfalls; when the roof is free again, a third of the strings still is not until the evening. */
function snowOf(draw: Draw, plan: DrawnPlant['plan'], fromS: number): TimedFault[] {
  return [2, 6].flatMap((day) => {
    const dayS = fromS + day * DAY_S;
    const freeS = dayS + Math.round((9 + 4 * draw.next()) * 3600);
    const patches = draw.some(plan.strings, Math.floor(plan.strings.length / 3));
    return [
      { fault: { kind: 'snow' as const }, fromS: dayS - DAY_S / 4, toS: freeS },
      ...patches.map((s) => ({
        fault: { kind: 'soiling' as const, string: s.name, share: 0.85 },
        fromS: freeS,
        toS: dayS + DAY_S,
      })),
    ];
  });
}

/** On two runs in five: from an hour to a day and a half. */
function cutOffOf(draw: Draw): OutputRun['cutOff'] {
  const happens = draw.next() < 0.4;
  const keeps = draw.next() < 0.6;
  const fromStep = draw.whole(STEPS_A_DAY, (RUN_DAYS - 2) * STEPS_A_DAY);
  const toStep = fromStep + draw.whole(STEPS_A_DAY / 24, 1.5 * STEPS_A_DAY);
  return happens ? { fromStep, toStep, keeps } : null;
}

/** Something new beside the roof: a few hours a day, over some modules in a row. */
function shadeOf(draw: Draw, string: string, units: number): Extract<Fault, { kind: 'shade' }> {
  const count = Math.min(units, draw.whole(4, 8));
  const first = draw.whole(1, units - count + 1);
  const fromHour = draw.oneOf([8, 9, 13, 14]);
  return {
    kind: 'shade',
    string,
    positions: Array.from({ length: count }, (_, k) => first + k),
    fromHour,
    toHour: fromHour + 2.5,
    share: 0.8,
  };
}
