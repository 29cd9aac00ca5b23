import fs from "node:fs";

/** @typedef {{ passed: number, failed: number }} Result */
/** @typedef {{ numPassedTests: number, numFailedTests: number, testResults: { status: string, assertionResults: { status: string }[] }[] }} Report */

/**
 * What a run of the test runner came to. A file that could not even be loaded is one failure; so is a run that broke
 * off without a report, or that ended badly although no test failed.
 *
 * @param {string} reportFile
 * @param {number} code
 * @returns {Result}
 */
export function resultOf(reportFile, code) {
  if (!fs.existsSync(reportFile)) return { passed: 0, failed: 1 };
  /** @type {Report} */
  const report = JSON.parse(fs.readFileSync(reportFile, "utf8"));
  const broken = report.testResults.filter(
    ({ status, assertionResults }) => status === "failed" && !assertionResults.some((test) => test.status === "failed"),
  );
  const failed = report.numFailedTests + broken.length;
  return { passed: report.numPassedTests, failed: failed === 0 && code !== 0 ? 1 : failed };
}

/** @param {readonly Result[]} results @returns {Result} */
export function total(results) {
  return results.reduce((sum, { passed, failed }) => ({ passed: sum.passed + passed, failed: sum.failed + failed }), {
    passed: 0,
    failed: 0,
  });
}
