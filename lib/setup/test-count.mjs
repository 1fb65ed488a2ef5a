/**
 * Counts a run from vitest's JSON report. A file that could not be loaded has no tests to count, and counts as one
 * failed; so does a run that ended badly for any other reason (an unhandled error, no report at all).
 *
 * @param {{ numPassedTests: number, numFailedTests: number, testResults: { status: string, assertionResults: { status: string }[] }[] } | null} report
 * @param {number} exitCode vitest's own
 * @returns {{ passed: number, failed: number }}
 */
export function countTests(report, exitCode) {
  if (report === null) return { passed: 0, failed: 1 }
  const brokenFiles = report.testResults.filter(
    (file) => file.status === 'failed' && !file.assertionResults.some((test) => test.status === 'failed'),
  ).length
  const failed = report.numFailedTests + brokenFiles
  return { passed: report.numPassedTests, failed: failed === 0 && exitCode !== 0 ? 1 : failed }
}
