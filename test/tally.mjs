/** What a test run comes to, in figures: pure, so that it can be tested itself. */

/**
 * The part of vitest's JSON report that is counted.
 * @typedef {object} VitestReport
 * @property {number} numPassedTests
 * @property {number} numFailedTests
 * @property {number} numPendingTests skipped ones: there are to be none, so they count as failed
 * @property {number} numTodoTests
 * @property {readonly { status: string, assertionResults: readonly unknown[] }[]} testResults
 */

/** @typedef {{ readonly passed: number, readonly failed: number }} Tally */

/**
 * A file that could not even be loaded has no test to fail: it counts as one.
 * No report at all (null) is a failure as well.
 * @param {VitestReport | null} report
 * @returns {Tally}
 */
export const countTests = (report) => {
  if (!report) return { passed: 0, failed: 1 };
  const unloaded = report.testResults.filter(
    ({ status, assertionResults }) => status === 'failed' && assertionResults.length === 0,
  );
  return {
    passed: report.numPassedTests,
    failed: report.numFailedTests + report.numPendingTests + report.numTodoTests + unloaded.length,
  };
};

/**
 * @param {readonly Tally[]} tallies
 * @returns {Tally}
 */
export const total = (tallies) => ({
  passed: tallies.reduce((sum, { passed }) => sum + passed, 0),
  failed: tallies.reduce((sum, { failed }) => sum + failed, 0),
});

/** @param {Tally} tally */
export const summaryLine = ({ passed, failed }) => `${passed} passed, ${failed} failed`;

/**
 * 0 only when something passed and nothing failed.
 * @param {Tally} tally
 */
export const exitCode = ({ passed, failed }) => (failed === 0 && passed > 0 ? 0 : 1);
