/**
 * Counts out of vitest's JSON report.
 * @param report parsed report, or null when vitest wrote none
 * @param status vitest's exit status
 * @returns an object { passed, failed, skipped }; a file that could not be loaded, a run that broke and a run without tests count as failed
 */
export function countsOf(report, status) {
  if (report === null) return { passed: 0, failed: 1, skipped: 0 };
  const passed = report.numPassedTests ?? 0;
  const skipped = (report.numPendingTests ?? 0) + (report.numTodoTests ?? 0);
  const unloaded = (report.testResults ?? []).filter(
    (file) => file.status === 'failed' && !file.assertionResults.some((test) => test.status === 'failed'),
  );
  let failed = (report.numFailedTests ?? 0) + unloaded.length;
  if (failed === 0 && (status !== 0 || passed === 0)) failed = 1;
  return { passed, failed, skipped };
}
