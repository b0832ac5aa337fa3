import { describe, expect, test } from 'vitest';
import { countTests, exitCode, summaryLine, total } from '../tally.mjs';

const report = (figures: object) => ({
  ...{ numPassedTests: 7, numFailedTests: 0, numPendingTests: 0, numTodoTests: 0 },
  testResults: [{ status: 'passed', assertionResults: [{}] }],
  ...figures,
});

describe('the closing line of a test run', () => {
  test('is the two figures alone', () => {
    expect(summaryLine({ passed: 12, failed: 3 })).toMatch(/^\d+ passed, \d+ failed$/);
  });

  test('adds the checks to the tests', () => {
    const checks = [
      { passed: 1, failed: 0 },
      { passed: 0, failed: 1 },
    ];
    expect(summaryLine(total([...checks, countTests(report({}))]))).toBe('8 passed, 1 failed');
  });

  test.each([
    ['a failed test', report({ numFailedTests: 1 })],
    ['a skipped test', report({ numPendingTests: 1 })],
    ['a test to be written', report({ numTodoTests: 1 })],
    [
      'a file that did not load',
      report({ testResults: [{ status: 'failed', assertionResults: [] }] }),
    ],
    ['no report', null],
  ])('%s counts as failed', (_, given) => {
    const tally = countTests(given);
    expect(tally.failed).toBe(1);
    expect(exitCode(tally)).toBe(1);
  });

  test('a file with a failed test counts that test alone', () => {
    const testResults = [{ status: 'failed', assertionResults: [{}, {}] }];
    expect(countTests(report({ numFailedTests: 1, testResults }))).toEqual({
      passed: 7,
      failed: 1,
    });
  });

  test('nothing run is no success', () => {
    expect(exitCode({ passed: 0, failed: 0 })).toBe(1);
    expect(exitCode({ passed: 1, failed: 0 })).toBe(0);
  });
});
