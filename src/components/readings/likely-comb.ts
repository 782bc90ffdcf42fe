import { expectedState, type ReadingQuestion } from '../../domain/readings/reading';
import type { RankedHypothesis } from '../../domain/readings/interpret';
import type { DrawnSlot } from '../../drawings/condition';

type Tooth = 'passing' | 'shutdown' | 'none' | 'dark' | 'disobeys';

const slot = (tooth: Tooth, i: number): DrawnSlot => ({
  position: i + 1,
  serial: tooth === 'none' ? null : '?',
  state: tooth === 'dark' ? 'dark' : tooth === 'shutdown' ? 'shutdown' : 'passing',
  verdict: tooth === 'disobeys' ? 'not_shutting_down' : null,
  voltage: tooth === 'passing' || tooth === 'disobeys' ? 1 : 0,
  voltageIn: null,
  assumed: false,
  expected: 1,
});

/**
 * The string as an explanation has it, one bar a unit: how many, not which, since a meter at the home run tells no
 * position. Null for explanations that say nothing of how many units pass.
 */
export function likelyComb(
  h: Pick<RankedHypothesis, 'kind' | 'count'>,
  question: ReadingQuestion,
): DrawnSlot[] | null {
  const n = question.units;
  const { passing } = expectedState(question);
  const teeth = (list: readonly [Tooth, number][]): DrawnSlot[] =>
    list
      .flatMap(([tooth, count]): Tooth[] => Array.from({ length: Math.max(0, count) }, () => tooth))
      .slice(0, n)
      .map(slot);
  const live = (count: number): [Tooth, number][] =>
    question.commanded === 'shutdown'
      ? [
          ['passing', Math.min(count, passing)],
          ['disobeys', count - passing],
        ]
      : [['passing', count]];
  switch (h.kind) {
    case 'all_in_shutdown':
      return teeth([['shutdown', n]]);
    case 'all_passing':
    case 'reversed':
      return teeth(live(n));
    case 'some_passing':
      return teeth([...live(h.count), ['shutdown', n - h.count]]);
    case 'unmated':
      return teeth([
        ['passing', Math.min(passing, n - h.count)],
        ['shutdown', n - h.count - passing],
        ['none', h.count],
      ]);
    case 'wired_past_its_unit':
      return teeth([...live(passing + 1), ['shutdown', n - passing - 1]]);
    case 'unpowered':
      return teeth([['dark', n]]);
    case 'one_reversed':
    case 'substring_bypassed':
    case 'open':
    case 'two_in_series':
    case 'unexplained':
      return null;
  }
}
