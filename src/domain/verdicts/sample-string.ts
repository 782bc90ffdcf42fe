import { UNIT_PRESETS } from '../equipment/unit-type';
import { CLAIMS, UNIT_STATES, VERDICTS, type Claim } from './codes';
import {
  commandedSpans,
  judgementTimes,
  timeLimitOf,
  type CommandPoint,
  type StringContext,
} from './context';
import type { UnitChange } from './evidence';
import { judgeFrame } from './judge';
import { newMemory, type StringMemory } from './memory';

/** A small string and short ways to feed and read it, for the tests of this folder. */

export const NOON = 1_750_000_000;
export const MINUTE = 60;

export function contextOf(
  zone: CommandPoint[],
  more: Partial<StringContext> & { n?: number; kind?: 'monitored' | 'optimizing' | 'shutdown_only' } = {},
): StringContext {
  const behaviour = more.behaviour ?? {
    ...UNIT_PRESETS[more.kind ?? 'monitored'],
    measures: 'input' as const,
  };
  const n = more.n ?? 3;
  return {
    behaviour,
    times: judgementTimes(MINUTE, 30),
    timeLimitSource: timeLimitOf('rapid_shutdown_30s').source,
    slots: new Array<boolean>(n).fill(true),
    heardAtS: new Array<number>(n).fill(0),
    commands: commandedSpans(behaviour, 'operating', zone, []),
    light: [],
    snowLikely: false,
    ...more,
  };
}
export const released: CommandPoint = { sinceS: NOON - 86_400, inForce: 'released' };
export const code = (c: Claim | null): number | null => (c === null ? null : CLAIMS.indexOf(c));
export const report = (
  memory: StringMemory,
  context: StringContext,
  atS: number,
  claims: (Claim | null)[],
  voltageOut?: (number | null)[],
): readonly UnitChange[] => judgeFrame(memory, context, { atS, state: claims.map(code), voltageOut }).changes;
export const verdicts = (m: StringMemory): string[] => m.verdict.map((v) => VERDICTS[v]!);
export const states = (m: StringMemory): string[] => m.state.map((s) => UNIT_STATES[s] ?? 'nothing');

/** Three passing units with a few minutes behind them. */
export function running(context: StringContext, untilS: number): StringMemory {
  const memory = newMemory(context);
  for (let t = untilS - 10 * MINUTE; t <= untilS; t += MINUTE)
    report(memory, context, t, ['passing', 'passing', 'passing']);
  return memory;
}
