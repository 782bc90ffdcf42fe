import { scanFrame, type JudgedFrame, MEASURED } from '../verdicts/observe';
import type { OutputLimits } from '../verdicts/context';
import { SEEN_PASSING } from '../verdicts/memory';
import type { EvidenceTrace, StringConduct, TestedPart, UnitConduct } from './shutdown-test-record';

/** What reports of one string show of a shutdown and of the return after it. Epoch seconds, volts. */

export interface ReportedTrace {
  measuringPoint: EvidenceTrace['measuringPoint'];
  accuracyV: number;
  startedS: number;
  voltage: readonly (number | null)[];
  /** V per slot, one row a second; null where units tell nothing. */
  unitV: readonly (readonly (number | null)[])[] | null;
}
export interface StringReports {
  part: TestedPart;
  limits: OutputLimits;
  /** Oldest first. */
  frames: readonly JudgedFrame[];
  traces: readonly ReportedTrace[];
  /** Of its input, oldest first. */
  inputs: readonly { atS: number; voltageV: number; currentA?: number | null }[];
}
export interface ConductTimes {
  /** When shutdown was commanded; null: nobody has said yet. */
  commandS: number | null;
  /** When it was released again; null: not yet. */
  releaseS: number | null;
  /** What comes later is not looked at. */
  untilS: number;
  timeLimitS: number;
  /** So long before the command a report still says what the unit did when it came. */
  lookBackS: number;
}

interface Seen {
  atS: number;
  passing: boolean;
  measured: boolean;
}

/**
 * The conduct of each unit. A unit has followed when it was seen passing before the command (or after it) and in
 * shutdown later, with nothing to the contrary before the release; the times lie between the two reports. A voltage
 * on its conductors counts before its claim.
 */
export function conductOf(given: StringReports, times: ConductTimes): StringConduct {
  // a trace grows for minutes: what lies past the end of the round is no part of it
  const traces = given.traces.flatMap((t): ReportedTrace[] => {
    const seconds = Math.floor(times.untilS - t.startedS) + 1;
    return seconds < 1
      ? []
      : [{ ...t, voltage: t.voltage.slice(0, seconds), unitV: t.unitV?.slice(0, seconds) ?? null }];
  });
  const reports = { ...given, traces, frames: given.frames.filter((f) => f.atS <= times.untilS) };
  const { part } = reports;
  const seen = observations(reports);
  const inputs = reports.inputs.filter((i) => i.atS <= times.untilS);
  const { commandS, releaseS } = times;
  const before =
    commandS === null ? [] : inputs.filter((i) => i.atS <= commandS && i.atS >= commandS - times.lookBackS);
  const during =
    commandS === null
      ? []
      : inputs.filter((i) => i.atS >= commandS + times.timeLimitS && (releaseS === null || i.atS < releaseS));
  const after = releaseS === null ? [] : inputs.filter((i) => i.atS > releaseS);
  const newest = (list: typeof inputs, fromS: number | null) => {
    const last = list.at(-1);
    return last === undefined || fromS === null
      ? null
      : { afterS: last.atS - fromS, voltageV: last.voltageV };
  };
  const newestSince =
    commandS === null
      ? undefined
      : inputs.findLast((i) => i.atS > commandS && (releaseS === null || i.atS < releaseS));
  const currentA = newestSince?.currentA ?? null;
  return {
    string: part.id,
    traces: reports.traces.map(({ unitV: _, startedS, voltage, ...t }) => ({
      ...t,
      startedAt: new Date(startedS * 1000).toISOString(),
      voltage: [...voltage],
    })),
    units: part.serials.map((serial, i) => unitConduct(i + 1, serial, seen[i] ?? [], times)),
    reports: reports.frames.length + reports.traces.reduce((n, t) => n + t.voltage.length, 0),
    input: newest(during, commandS),
    ...(newestSince && currentA !== null && commandS !== null
      ? { current: { afterS: newestSince.atS - commandS, currentA } }
      : {}),
    inputBeforeV: before.length === 0 ? null : Math.max(...before.map((i) => i.voltageV)),
    sums: commandS === null ? [] : sumsOf(reports, commandS),
    inputs:
      commandS === null
        ? []
        : inputs
            .filter((i) => i.atS >= commandS - DRAWN_BEFORE_S)
            .map((i): [number, number] => [i.atS - commandS, i.voltageV]),
    inputAgain: newest(after, releaseS),
  };
}

/** So many seconds before the command are drawn. */
const DRAWN_BEFORE_S = 60;

/** The string's voltage by its units, where every one reported what is on its conductors. */
function sumsOf({ part, frames, limits }: StringReports, commandS: number): [number, number][] {
  if (!limits.measuresOutput) return [];
  return frames.flatMap((f): [number, number][] => {
    if (f.atS < commandS - DRAWN_BEFORE_S) return [];
    const values = part.serials.flatMap((serial, i) => (serial === null ? [] : [f.voltageOut?.[i] ?? null]));
    if (values.length === 0 || values.some((v) => v === null)) return [];
    return [[f.atS - commandS, Math.round(values.reduce<number>((a, v) => a + (v ?? 0), 0)) / 100]];
  });
}

function observations(reports: StringReports): Seen[][] {
  const n = reports.part.serials.length;
  const seen: Seen[][] = Array.from({ length: n }, () => []);
  const unsettled = new Array<number>(n).fill(-1);
  for (const frame of reports.frames) {
    const { shown } = scanFrame(reports.limits, frame, unsettled, new Array<number>(n).fill(0));
    for (let i = 0; i < n; i++) {
      const code = shown[i] ?? -1;
      if (code <= 0) continue;
      seen[i]!.push({
        atS: frame.atS,
        passing: (code & ~MEASURED) === SEEN_PASSING,
        measured: (code & MEASURED) !== 0,
      });
    }
  }
  const { passingFromCv, shutdownToCv } = reports.limits;
  for (const trace of reports.traces)
    trace.unitV?.forEach((row, second) => {
      const atS = trace.startedS + second;
      row.forEach((v, i) => {
        if (v === null || i >= n) return;
        const passing = v * 100 >= passingFromCv;
        if (passing || v * 100 <= shutdownToCv) seen[i]!.push({ atS, passing, measured: true });
      });
    });
  // at one instant the passing report comes last: it is the one that counts
  for (const list of seen) list.sort((a, b) => a.atS - b.atS || Number(a.passing) - Number(b.passing));
  return seen;
}

function unitConduct(
  position: number,
  serial: string | null,
  seen: readonly Seen[],
  { commandS, releaseS, untilS, lookBackS }: ConductTimes,
): UnitConduct {
  const conduct: UnitConduct = {
    position,
    serial,
    followed: null,
    passedAtS: null,
    downBefore: false,
    basis: 'nothing',
    returned: null,
    heldAtS: null,
  };
  if (serial === null || commandS === null) return conduct;
  const before = seen.findLast((s) => s.atS <= commandS && s.atS >= commandS - lookBackS);
  const during = seen.filter((s) => s.atS > commandS && s.atS < (releaseS ?? untilS + 1));
  const lastPassing = during.findLast((s) => s.passing);
  const down = during.find((s) => !s.passing && (lastPassing === undefined || s.atS > lastPassing.atS));
  const used = [before, lastPassing, down].filter((s) => s !== undefined);
  if (used.length > 0) conduct.basis = used.every((s) => s.measured) ? 'measured' : 'claim';
  conduct.downBefore = before?.passing === false && lastPassing === undefined;
  const wasPassing = before?.passing === true || lastPassing !== undefined;
  if (down !== undefined && wasPassing)
    conduct.followed = [lastPassing === undefined ? 0 : lastPassing.atS - commandS, down.atS - commandS];
  else if (lastPassing !== undefined) conduct.passedAtS = lastPassing.atS - commandS;
  if (releaseS === null) return conduct;
  const after = seen.filter((s) => s.atS >= releaseS);
  const again = after.find((s) => s.passing);
  const held = after.findLast((s) => !s.passing && (again === undefined || s.atS < again.atS));
  // one that never went has nothing to come back from
  const went = conduct.followed !== null || conduct.downBefore || held !== undefined;
  if (again !== undefined && went)
    conduct.returned = [held === undefined ? 0 : held.atS - releaseS, again.atS - releaseS];
  else if (again === undefined && held !== undefined) conduct.heldAtS = held.atS - releaseS;
  return conduct;
}
