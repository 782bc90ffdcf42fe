import { median } from '../output/robust';
import {
  BEFORE_MIN_A,
  CLEAR_OF_ZERO,
  INPUT_SHARE,
  ZERO_A,
  type InputResult,
  type IsolationFinding,
  type IsolationOutcome,
  type IsolationWatch,
  type WatchedInput,
} from './isolation-watch';

/** What the inputs' own measurements say while a string is isolated: a sum, never a unit. */

export type InputBefore = { input: WatchedInput; before: number | null };

/** What inputs carried in a span, and what each lost beyond the course that all inputs share. */
export function inputsAt(
  inputs: readonly InputBefore[],
  watch: IsolationWatch,
  toS: number,
  fromS = toS - 2 * watch.reportIntervalS,
): InputResult[] {
  const during = inputs.map(({ input, before: was }) => {
    const values = input.samples.flatMap((s) =>
      s.current !== null && s.atS >= fromS && s.atS <= toS && s.atS > watch.startedAtS ? [s.current] : [],
    );
    return { was, now: values.length === 0 ? null : median(values) };
  });
  return inputs.map(({ input, before: was }, k) => {
    const { now } = during[k]!;
    const others = during.flatMap((d, i) =>
      i !== k && d.was !== null && d.was >= BEFORE_MIN_A && d.now !== null ? [d.now / d.was] : [],
    );
    const share = others.length === 0 ? null : median(others);
    return {
      name: input.name,
      strings: [...input.strings],
      before: was,
      during: now,
      lost:
        was === null ||
        was < BEFORE_MIN_A ||
        now === null ||
        share === null ||
        share * was < CLEAR_OF_ZERO * ZERO_A
          ? null
          : Math.min(1, Math.max(0, 1 - now / (was * share))),
    };
  });
}

/** For strings whose units report nothing: only the sum at an input tells, and not which unit. */
export function byInputOnly(
  watch: IsolationWatch,
  own: InputBefore | undefined,
  inputs: readonly InputBefore[],
  result: (outcome: IsolationOutcome, more?: Partial<IsolationFinding>) => IsolationFinding,
): IsolationFinding {
  if (own?.before == null) return result('cant_tell', { reason: 'no_reports' });
  if (own.before < BEFORE_MIN_A) return result('cant_tell', { reason: 'no_current_before' });
  const times = [...new Set(inputs.flatMap((i) => i.input.samples.map((s) => s.atS)))].filter(
    (t) => t > watch.startedAtS && t <= watch.nowS,
  );
  times.sort((a, b) => a - b);
  // an input that lost what one string gives it, beyond what all inputs lost
  const fallenAt = (t: number): InputResult[] =>
    inputsAt(inputs, watch, t, t - watch.reportIntervalS / 2).filter(
      (i) => i.lost !== null && i.lost * i.strings.length >= INPUT_SHARE,
    );
  const key = (list: readonly InputResult[]): string => list.map((i) => i.name).join();
  for (let k = 0; k + 1 < times.length; k++) {
    const fell = fallenAt(times[k]!);
    if (fell.length === 0 || key(fell) !== key(fallenAt(times[k + 1]!))) continue;
    let last = k + 1;
    while (last + 1 < times.length && key(fallenAt(times[last + 1]!)) === key(fell)) last++;
    const next = times[last + 1];
    const here = fell.some((i) => i.name === own.input.name);
    return result(!here ? 'other_string' : fell.length > 1 ? 'several_strings' : 'input_only', {
      strings: here && fell.length === 1 ? [watch.string] : fell.flatMap((i) => i.strings),
      dropped: { afterS: times[k - 1] ?? watch.startedAtS, byS: times[k]! },
      returned: next === undefined ? null : { afterS: times[last]!, byS: next },
      inputs: inputsAt(inputs, watch, times[last]!, times[k]),
    });
  }
  return result('watching');
}
