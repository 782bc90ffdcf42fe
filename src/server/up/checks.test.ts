import { describe, expect, it } from 'vitest';
import { countReport, triedAgain } from './checks.mjs';

const file = (status: string, ...tests: string[]) => ({
  status,
  assertionResults: tests.map((t) => ({ status: t })),
});

describe('the count of a test run', () => {
  it('adds up what passed and what failed', () => {
    const report = {
      success: false,
      testResults: [file('passed', 'passed', 'passed'), file('failed', 'passed', 'failed')],
    };
    expect(countReport(report)).toEqual({ passed: 3, failed: 1 });
  });

  it('counts a skipped test as failed', () => {
    expect(
      countReport({ success: true, testResults: [file('passed', 'passed', 'skipped', 'todo')] }),
    ).toEqual({
      passed: 1,
      failed: 2,
    });
  });

  it('counts a file that could not be loaded', () => {
    expect(countReport({ success: false, testResults: [file('failed'), file('passed', 'passed')] })).toEqual({
      passed: 1,
      failed: 1,
    });
  });

  it('counts a file whose tests passed and whose clean-up failed', () => {
    expect(countReport({ success: false, testResults: [file('failed', 'passed')] })).toEqual({
      passed: 1,
      failed: 1,
    });
  });

  it('counts an error outside any file', () => {
    expect(countReport({ success: false, testResults: [file('passed', 'passed')] })).toEqual({
      passed: 1,
      failed: 1,
    });
  });
});

it('tells which tests passed only when they were tried again', () => {
  const test = (fullName: string, status: string, ...failureMessages: string[]) => ({
    fullName,
    status,
    failureMessages,
  });
  const name = '/somewhere/tests/e2e/pages.test.ts';
  expect(
    triedAgain({
      testResults: [
        { name, assertionResults: [test('at once', 'passed'), test('the fleet', 'passed', 'timed out')] },
        { name, assertionResults: [test('never', 'failed', 'timed out', 'timed out')] },
      ],
    }),
  ).toEqual(['pages.test.ts › the fleet']);
});
