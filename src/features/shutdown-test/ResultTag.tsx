import { Tag, type Tone } from '../../components/ui/Tag';
import type { TestResult } from '../../domain/commissioning/test-results';
import { RESULT_WORDS } from '../../words/domain-shutdown-test';

const LOOK: Record<TestResult, { tone: Tone; shape: string }> = {
  passed: { tone: 'petrol', shape: '✓' },
  failed: { tone: 'crimson', shape: '▲' },
  consistent: { tone: 'outline', shape: '≈' },
  not_witnessed: { tone: 'slate', shape: '?' },
};

/** A result as a word with its shape. */
export function ResultTag({ result }: { result: TestResult }) {
  return <Tag {...LOOK[result]}>{RESULT_WORDS[result]}</Tag>;
}
