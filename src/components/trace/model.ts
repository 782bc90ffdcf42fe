import { listed } from '../../drawings/numbers';
import type { SiteTraces, StringTrace } from '../../schemas/api/trace';
import { traceModel } from '../../words/trace';

/** What a trace shows of one string, in figures. */
export interface TraceFacts {
  trace: StringTrace;
  /** V at the command; null: not known. */
  first: number | null;
  /** V, newest known. */
  last: number | null;
  /** Seconds after the command from which it stayed at or under the limit as far as the trace goes; null: it is not. */
  underFromS: number | null;
  /** Seconds that the trace holds. */
  seconds: number;
}

export function factsOf(trace: StringTrace, limitV: number): TraceFacts {
  const known = trace.voltage.flatMap((v, s) => (v === null ? [] : [{ s, v }]));
  let underFromS: number | null = null;
  for (const { s, v } of known) {
    if (v > limitV) underFromS = null;
    else underFromS ??= s;
  }
  return {
    trace,
    first: known[0]?.v ?? null,
    last: known.at(-1)?.v ?? null,
    underFromS,
    seconds: trace.voltage.length,
  };
}

const POINT_ORDER = { home_run: 0, unit_sum: 1, input: 2 } as const;
const knownIn = (t: StringTrace): number => t.voltage.filter((v) => v !== null).length;

/**
 * One trace a string: measured at the home run before all, else the one that knows more. An inverter's input is held
 * up by its capacitors for a while after the string has let go.
 */
export function bestTraces(traces: readonly StringTrace[]): StringTrace[] {
  const best = new Map<string, StringTrace>();
  for (const t of traces) {
    const other = best.get(t.stringId);
    const better =
      !other ||
      (t.measuringPoint === 'home_run' && knownIn(t) > 0) ||
      (other.measuringPoint !== 'home_run' &&
        (knownIn(t) > 2 * knownIn(other) ||
          (POINT_ORDER[t.measuringPoint] < POINT_ORDER[other.measuringPoint] &&
            2 * knownIn(t) >= knownIn(other))));
    if (better) best.set(t.stringId, t);
  }
  return [...best.values()];
}

export const POINT_WORDS = {
  home_run: traceModel.atTheHomeRun,
  input: traceModel.atTheInvertersInput,
  unit_sum: traceModel.sumOfWhatIts,
} as const;

const SHUTDOWN = new Set(['initiator', 'keep_alive_lost', 'power_lost']);

/** What the traces show, in one or two sentences. They come from telemetry: never a test. */
export function traceWords(read: SiteTraces): string {
  if (!read.startedAt || read.traces.length === 0) return traceModel.noVoltagesHaveBeen;
  const facts = bestTraces(read.traces).map((t) => factsOf(t, read.limit.voltage));
  const known = facts.filter((f) => f.last !== null);
  const untold = facts.length - known.length;
  const rest = untold > 0 ? traceModel.untoldNothing(untold) : '';
  if (known.length === 0) return traceModel.noStringHasTold(rest);
  const under = known.filter((f) => f.underFromS !== null);
  if (!read.command || !SHUTDOWN.has(read.command.inForce)) {
    const up = known.filter((f) => (f.last ?? 0) > read.limit.voltage).length;
    return traceModel.ofAboveAgain(up, known.length, read.limit.voltage, rest);
  }
  const times = under.map((f) => f.underFromS ?? 0);
  const span =
    Math.min(...times) === Math.max(...times)
      ? `${times[0]} s`
      : traceModel.minToMaxS(Math.min(...times), Math.max(...times));
  if (under.length === known.length)
    return traceModel.known1TheString(known.length, read.limit.voltage, span, rest);
  const over = known.filter((f) => f.underFromS === null).map((f) => f.trace.stringName);
  const named = over.length <= 5 ? listed(over) : traceModel.countedOverString(over.length);
  return traceModel.ofFellToOr(under.length, known.length, read.limit.voltage, named, over.length, rest);
}
