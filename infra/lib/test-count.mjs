/**
 * How many tests of a stage passed and failed.
 * @typedef {{ passed: number, failed: number }} Count
 */

/**
 * Counts a stage by vitest's JSON report and its exit code. A stage that went wrong without a failed test (a file
 * that does not load, no test found, a crash) counts as one failure; so does a test that was skipped, because a
 * skipped test proves nothing, unless the person asked for some tests only.
 * @param {object} options
 * @param {string | null} options.report the report's text, null when none was written
 * @param {number} options.exitCode
 * @param {boolean} [options.isSelection]
 * @returns {Count}
 */
export function countStage({ report, exitCode, isSelection = false }) {
  const found = report === null ? null : parseReport(report);
  const passed = found?.numPassedTests ?? 0;
  const skipped = isSelection ? 0 : (found?.numPendingTests ?? 0) + (found?.numTodoTests ?? 0);
  const failed = (found?.numFailedTests ?? 0) + skipped;
  const wentWrong = exitCode !== 0 || found === null;
  return { passed, failed: failed === 0 && wentWrong ? 1 : failed };
}

/** @param {string} text */
function parseReport(text) {
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
}

/**
 * @param {Count[]} counts
 * @returns {Count}
 */
export function sum(counts) {
  return counts.reduce(
    (total, count) => ({ passed: total.passed + count.passed, failed: total.failed + count.failed }),
    { passed: 0, failed: 0 },
  );
}

/**
 * The line that ends a test run, alone on its line, for people and scripts.
 * @param {Count} count
 */
export function summaryLine({ passed, failed }) {
  return `${passed} passed, ${failed} failed`;
}
