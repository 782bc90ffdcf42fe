/** What a shutdown test has shown, of a string or of the whole. */
export type TestResult = 'passed' | 'failed' | 'consistent' | 'not_witnessed';

/** The gravest first: the whole of a test is as good as its worst string. */
export const WORST: readonly TestResult[] = ['failed', 'not_witnessed', 'consistent', 'passed'];
