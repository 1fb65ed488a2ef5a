export type VitestReport = {
  numPassedTests: number
  numFailedTests: number
  testResults: { status: string; assertionResults: { status: string }[] }[]
}

export declare function countTests(
  report: VitestReport | null,
  exitCode: number,
): { passed: number; failed: number }
