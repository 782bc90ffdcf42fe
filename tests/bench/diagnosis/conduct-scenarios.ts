import {
  BOTH_SIDES,
  HOLDING,
  ON_KEEP_ALIVE,
  OPTIMIZING,
  OUTPUT_SIDE,
  SHUTDOWN_ONLY,
} from '../../../simulator/scenarios/catalogue';
import type { Fault } from '../../../simulator/faults/kinds';
import type { StringPlan } from '../../../simulator/plant/plan';
import type { CauseVerdict, PartKind } from '../../../src/domain/causes/site';
import { Draw, drawPlant, type DrawnPlant, type TimedFault } from './plants';

/** What happens on a plant-day on which the conduct of units is judged. */

/** A fault that somebody is to be sent for: which parts, named as the cause, would send them to the right place. */
export interface ToExplain {
  verdict: CauseVerdict;
  parts: { kind: PartKind; name: string }[];
  /** `STRING:POSITION` of the units that show it. */
  units: string[];
  /** When it is asked for, epoch seconds. */
  askedS: number;
}

export interface ConductDay {
  drawn: DrawnPlant;
  faults: TimedFault[];
  /** Initiators opened and closed, epoch seconds. */
  openings: { initiator: string; fromS: number; toS: number }[];
  toExplain: ToExplain[];
  /** Snow lies on the modules for some hours: nobody is to blame for silence then. */
  snow: boolean;
  /** Nothing of the site comes through for a while; `keeps`: the logger hands it over afterwards. */
  cutOff: { fromS: number; toS: number; keeps: boolean } | null;
}

export const SCENARIOS = [
  'sound',
  'stuck',
  'keeps_passing',
  'transmitter_unheard',
  'cross_talk',
  'gateway_out',
  'stuck_at_release',
  'mute',
  'stuck_and_gateway',
  'stuck',
  'keeps_passing',
  'sound',
  'stuck_unseen',
  'keeps_passing_unseen',
  'snow',
  'stuck_unseen',
] as const;

const ALL_TYPES = [BOTH_SIDES, OUTPUT_SIDE, HOLDING, ON_KEEP_ALIVE, OPTIMIZING, SHUTDOWN_ONLY];
const BY_LOGGER = [BOTH_SIDES, OUTPUT_SIDE, HOLDING, OPTIMIZING];
const TYPES: Partial<Record<(typeof SCENARIOS)[number], string[]>> = {
  transmitter_unheard: [ON_KEEP_ALIVE, ON_KEEP_ALIVE, SHUTDOWN_ONLY],
  cross_talk: [ON_KEEP_ALIVE],
  gateway_out: BY_LOGGER,
  stuck_and_gateway: BY_LOGGER,
  mute: BY_LOGGER,
  stuck_at_release: [BOTH_SIDES, OUTPUT_SIDE, ON_KEEP_ALIVE, OPTIMIZING],
  stuck_unseen: [SHUTDOWN_ONLY],
  keeps_passing_unseen: [SHUTDOWN_ONLY],
  snow: [BOTH_SIDES, OUTPUT_SIDE, SHUTDOWN_ONLY, OPTIMIZING],
};
/** Strings of a site and how often such a size comes: 12 to 600 units. */
const SIZES = [1, 2, 2, 4, 4, 6, 6, 8, 8, 10, 14, 20, 32];

/** Draws plant-day `n`. */
export function conductDay(n: number): ConductDay {
  const draw = new Draw(1_000_000 + n);
  const scenario = SCENARIOS[n % SCENARIOS.length]!;
  const manyParts = ['transmitter_unheard', 'cross_talk', 'gateway_out', 'stuck_and_gateway'].includes(
    scenario,
  );
  const strings = Math.max(manyParts ? 4 : 1, draw.oneOf(SIZES));
  const unitType = draw.oneOf(TYPES[scenario] ?? ALL_TYPES);
  const sharesInputs = draw.next() < 0.3 && strings > 1;
  const drawn = drawPlant(
    {
      n,
      unitType,
      strings,
      units: strings > 20 ? [16, 20] : [12, 20],
      perInput: sharesInputs ? 2 : 1,
      reportIntervalS: draw.oneOf([30, 60, 60, 60, 120, 300]),
      twoZones: strings >= 4,
      gateways: manyParts ? 3 : 1 + Math.floor(strings / 6),
      obstacle: draw.next() < 0.3,
      days: 1,
      frost: scenario === 'snow',
    },
    draw,
  );
  const { plan, fromS } = drawn;
  const at = (hour: number): number => fromS + Math.round(hour * 3600);
  const interval = plan.reportIntervalS;
  const faults: TimedFault[] = [];
  const toExplain: ToExplain[] = [];
  const add = (fault: Fault, from: number): void => void faults.push({ fault, fromS: from, toS: null });
  const places = plan.strings.flatMap((s) => s.slots.map((_, i) => ({ string: s.name, position: i + 1 })));
  const onsetS = at(draw.next() < 0.3 ? 1 : 9.5 + 3 * draw.next());
  const askedS = Math.max(onsetS, at(9.5)) + Math.max(900, 6 * interval);
  const openS = at(11 + 2 * draw.next()) + draw.whole(0, 59);
  const openings = plan.zones.map((z) => ({
    initiator: z.initiator,
    fromS: openS,
    toS: openS + Math.max(900, 8 * interval) + 13,
  }));
  const lastOpenS = openS + Math.max(900, 8 * interval);
  const explainUnit = (
    verdict: CauseVerdict,
    p: { string: string; position: number },
    when: number,
  ): void => {
    const s = plan.strings.find((x) => x.name === p.string)!;
    if (s.kind === 'shutdown_only') return;
    toExplain.push({
      verdict,
      parts: [{ kind: 'unit', name: s.slots[p.position - 1]!.serial! }],
      units: [`${p.string}:${p.position}`],
      askedS: when,
    });
  };
  const unitsOf = (list: readonly StringPlan[]): string[] =>
    list.flatMap((s) => s.slots.map((_, i) => `${s.name}:${i + 1}`));
  const stuckSingles = (): void => {
    for (const p of draw.some(places, draw.whole(1, 3))) {
      add({ kind: 'stuck', ...p, at: 'now' }, onsetS);
      explainUnit('stuck', p, askedS);
    }
  };
  const gatewayOut = (): void => {
    const number = draw.whole(1, 3);
    add({ kind: 'gateway_out', logger: plan.loggers[0]!.serial, gateway: number, keeps: false }, onsetS);
    toExplain.push({
      verdict: 'silent',
      parts: [{ kind: 'gateway', name: plan.loggers[0]!.gateways[number - 1]!.name }],
      units: unitsOf(plan.strings.filter((s) => s.slots[0]!.gateway === number)),
      askedS,
    });
  };

  if (scenario === 'stuck' || scenario === 'stuck_unseen') stuckSingles();
  else if (scenario === 'stuck_at_release')
    for (const p of draw.some(places, draw.whole(1, 3))) {
      add({ kind: 'stuck', ...p, at: 'next_release' }, openS + 60);
      explainUnit('stuck', p, openings[0]!.toS + Math.max(900, 6 * interval));
    }
  else if (scenario === 'snow')
    faults.push({ fault: { kind: 'snow' }, fromS: at(1), toS: at(11 + 3 * draw.next()) });
  else if (scenario === 'keeps_passing' || scenario === 'keeps_passing_unseen')
    for (const p of draw.some(places, draw.whole(1, 3))) {
      add({ kind: 'not_shutting_down', ...p, claims: draw.oneOf(['passing', 'shutdown']) }, at(1));
      explainUnit('not_shutting_down', p, lastOpenS);
    }
  else if (scenario === 'mute')
    for (const p of draw.some(places, draw.whole(1, 2))) {
      add({ kind: 'unit_mute', ...p }, onsetS);
      explainUnit('silent', p, askedS);
    }
  else if (scenario === 'gateway_out') gatewayOut();
  else if (scenario === 'stuck_and_gateway') {
    stuckSingles();
    gatewayOut();
    // what nobody hears nobody can say stuck of
    const deaf = new Set(toExplain.find((t) => t.verdict === 'silent')!.units);
    toExplain.splice(
      0,
      toExplain.length,
      ...toExplain.filter((t) => t.verdict === 'silent' || !deaf.has(t.units[0]!)),
    );
  } else if (scenario === 'transmitter_unheard') {
    const served = plan.strings.filter((s) => s.transmitters.includes('T1'));
    const whole = draw.next() < 0.5;
    const deaf = whole ? served : [draw.oneOf(served)];
    add({ kind: 'transmitter_unheard', transmitter: 'T1', strings: deaf.map((s) => s.name) }, onsetS);
    toExplain.push({
      verdict: 'stuck',
      parts: whole
        ? [{ kind: 'transmitter', name: 'T1' }]
        : [
            { kind: 'transmitter', name: 'T1' },
            { kind: 'string', name: deaf[0]!.name },
          ],
      units: unitsOf(deaf),
      askedS,
    });
  } else if (scenario === 'cross_talk') {
    const near = draw.some(
      plan.strings.filter((s) => s.zone === 'Zone 1'),
      draw.whole(1, 2),
    );
    add({ kind: 'cross_talk', transmitter: 'T2', strings: near.map((s) => s.name) }, at(1));
    openings.splice(1); // the neighbour's transmitter goes on sending
    toExplain.push({
      verdict: 'not_shutting_down',
      parts: [{ kind: 'transmitter', name: 'T2' }],
      units: unitsOf(near),
      askedS: lastOpenS,
    });
  }
  const cutOff = cutOffOf(draw, at, openings);
  return { drawn, faults, openings, toExplain, snow: scenario === 'snow', cutOff };
}

/** On one day in four the logger is cut off for twenty minutes to three hours, but for the time of a command. */
function cutOffOf(
  draw: Draw,
  at: (hour: number) => number,
  openings: ConductDay['openings'],
): ConductDay['cutOff'] {
  const happens = draw.next() < 0.25;
  const keeps = draw.next() < 0.6;
  const fromS = at(7.5 + 8 * draw.next());
  const toS = fromS + (keeps ? draw.whole(1200, 10_800) : 1200);
  const clear = openings.every((o) => o.toS + 300 < fromS || o.fromS > toS + 300);
  return happens && clear ? { fromS, toS, keeps } : null;
}
