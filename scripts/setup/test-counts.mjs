import fs from 'node:fs';

/** @typedef {{ passed: number, failed: number, skipped: number }} Counts */

/**
 * @param {readonly Counts[]} all
 * @returns {Counts}
 */
export const sumCounts = (all) =>
  all.reduce(
    (sum, counts) => ({
      passed: sum.passed + counts.passed,
      failed: sum.failed + counts.failed,
      skipped: sum.skipped + counts.skipped
    }),
    { passed: 0, failed: 0, skipped: 0 }
  );

/**
 * Counts of a vitest JSON report. A file that could not be run has no tests of its own and counts as one failure.
 * @param {any} report
 * @returns {Counts}
 */
export function vitestCounts(report) {
  const brokenFiles = report.testResults.filter(
    (/** @type {any} */ file) =>
      file.status === 'failed' && !file.assertionResults.some((/** @type {any} */ t) => t.status === 'failed')
  ).length;
  return {
    passed: report.numPassedTests,
    failed: report.numFailedTests + brokenFiles,
    skipped: report.numPendingTests + report.numTodoTests
  };
}

/**
 * Counts of a Playwright JSON report. A retried test that passes at last is counted as failed: it cannot be relied on.
 * @param {any} report
 * @returns {Counts}
 */
export function playwrightCounts(report) {
  const { expected, unexpected, flaky, skipped } = report.stats;
  return { passed: expected, failed: unexpected + flaky + report.errors.length, skipped };
}

/**
 * What a suite's report and exit code say together: a suite that failed without counting a failure, or left no report,
 * counts as one failure.
 * @param {string} file
 * @param {(report: any) => Counts} read
 * @param {number} exitCode
 * @returns {Counts}
 */
export function countSuite(file, read, exitCode) {
  let counts = { passed: 0, failed: 0, skipped: 0 };
  try {
    counts = read(JSON.parse(fs.readFileSync(file, 'utf8')));
  } catch {
    return { ...counts, failed: 1 };
  }
  return exitCode !== 0 && counts.failed === 0 ? { ...counts, failed: 1 } : counts;
}

/** @param {Counts} counts */
export const closingLine = ({ passed, failed, skipped }) =>
  `${passed} passed, ${failed} failed${skipped > 0 ? `, ${skipped} skipped` : ''}`;
