/** Adds up what really ran: verify steps by their exit, tests by vitest's own report. */

/** @typedef {{passed: number, failed: number, skipped: number}} Tally */

/** @returns {Tally} */
export function emptyTally() {
  return { passed: 0, failed: 0, skipped: 0 };
}

/** @param {Tally} a @param {Tally} b @returns {Tally} */
export function addTally(a, b) {
  return { passed: a.passed + b.passed, failed: a.failed + b.failed, skipped: a.skipped + b.skipped };
}

/**
 * Counts one report of vitest's JSON reporter. What is no test but went wrong counts as one failure: a file that did not
 * load, an error outside every test, a report that is missing, a run without a single test.
 * @param {unknown} report the parsed report, undefined when there is none
 * @returns {Tally}
 */
export function countReport(report) {
  if (typeof report !== 'object' || report === null) return { ...emptyTally(), failed: 1 };
  const passed = numberAt(report, 'numPassedTests');
  const failedTests = numberAt(report, 'numFailedTests');
  const skipped = numberAt(report, 'numPendingTests') + numberAt(report, 'numTodoTests');
  const failed = failedTests + unloadedFiles(report);
  const success = 'success' in report && report.success === true;
  const silent = failed === 0 && (!success || passed === 0);
  return { passed, failed: silent ? 1 : failed, skipped };
}

/** @param {object} report @param {string} key */
function numberAt(report, key) {
  const value = /** @type {Record<string, unknown>} */ (report)[key];
  return typeof value === 'number' ? value : 0;
}

/** @param {object} report */
function unloadedFiles(report) {
  const files = 'testResults' in report && Array.isArray(report.testResults) ? report.testResults : [];
  return files.filter((file) => file.status === 'failed' && !file.assertionResults.some(hasFailed)).length;
}

/** @param {{status: string}} assertion */
function hasFailed(assertion) {
  return assertion.status === 'failed';
}

/** @param {Tally} tally @returns {string} the last line of a test run */
export function tallyLine({ passed, failed, skipped }) {
  return `${passed} passed, ${failed} failed${skipped > 0 ? `, ${skipped} skipped` : ''}`;
}

/** @param {Tally} tally @returns {boolean} whether a run may be called good */
export function isGood({ passed, failed }) {
  return failed === 0 && passed > 0;
}
