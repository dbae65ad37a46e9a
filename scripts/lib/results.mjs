import { existsSync, readFileSync } from "node:fs";

/**
 * @typedef {{ passed: number, failed: number, notes: string[] }} Result `notes` say what failed besides single tests.
 */

/**
 * Counts a suite from its runner's JSON report. A suite that left no report, ran no test, or failed in
 * any other way than by a test counts as one failure; so does every test that was skipped.
 *
 * @param {string} file
 * @param {number | string} code the runner's exit code.
 * @param {(report: unknown) => Result} count
 * @returns {Result}
 */
export function suiteResult(file, code, count) {
  if (!existsSync(file)) return { passed: 0, failed: 1, notes: [`no report (exit ${code})`] };
  const result = count(JSON.parse(readFileSync(file, "utf8")));
  if (result.passed + result.failed === 0)
    return { passed: 0, failed: 1, notes: [...result.notes, "no test ran"] };
  if (code !== 0 && result.failed === 0) {
    return { ...result, failed: 1, notes: [...result.notes, `the runner failed (exit ${code})`] };
  }
  return result;
}

/**
 * @param {any} report of Vitest's JSON reporter.
 * @returns {Result}
 */
export function countVitest(report) {
  const skipped = report.numPendingTests + (report.numTodoTests ?? 0);
  const crashed = report.testResults
    .filter((/** @type {any} */ file) => file.status === "failed")
    .filter((/** @type {any} */ file) =>
      file.assertionResults.every((/** @type {any} */ t) => t.status !== "failed"),
    )
    .map((/** @type {any} */ file) => `${file.name} could not run: ${String(file.message).split("\n")[0]}`);
  return {
    passed: report.numPassedTests,
    failed: report.numFailedTests + skipped + crashed.length,
    notes: [...crashed, ...(skipped > 0 ? [`${skipped} skipped`] : [])],
  };
}

/**
 * @param {any} report of Playwright's JSON reporter.
 * @returns {Result}
 */
export function countPlaywright(report) {
  const { expected, unexpected, flaky, skipped } = report.stats;
  const errors = report.errors.map((/** @type {any} */ error) => String(error.message).split("\n")[0]);
  return {
    passed: expected,
    failed: unexpected + flaky + skipped + errors.length,
    notes: [
      ...errors,
      ...(skipped > 0 ? [`${skipped} skipped`] : []),
      ...(flaky > 0 ? [`${flaky} flaky`] : []),
    ],
  };
}
