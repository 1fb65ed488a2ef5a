import { expect, it } from 'vitest'
import { countTests } from '@/lib/setup/test-count.mjs'

const passed = { status: 'passed', assertionResults: [{ status: 'passed' }, { status: 'passed' }] }
const failed = { status: 'failed', assertionResults: [{ status: 'passed' }, { status: 'failed' }] }
const unloadable = { status: 'failed', assertionResults: [] }

it('tests are counted, not files', () => {
  const report = { numPassedTests: 3, numFailedTests: 1, testResults: [passed, failed] }
  expect(countTests(report, 1)).toEqual({ passed: 3, failed: 1 })
})

it('a file that could not be loaded counts as one failed', () => {
  const report = { numPassedTests: 2, numFailedTests: 0, testResults: [passed, unloadable] }
  expect(countTests(report, 1)).toEqual({ passed: 2, failed: 1 })
})

it('a file whose tests passed but whose clean-up failed counts as one failed', () => {
  const report = { numPassedTests: 2, numFailedTests: 0, testResults: [{ ...passed, status: 'failed' }] }
  expect(countTests(report, 1)).toEqual({ passed: 2, failed: 1 })
})

it('a run that ended badly without a failed test counts as one failed', () => {
  const report = { numPassedTests: 2, numFailedTests: 0, testResults: [passed] }
  expect(countTests(report, 1)).toEqual({ passed: 2, failed: 1 })
})

it('a run without a report counts as one failed', () => {
  expect(countTests(null, 0)).toEqual({ passed: 0, failed: 1 })
})

it('a clean run has none failed', () => {
  const report = { numPassedTests: 2, numFailedTests: 0, testResults: [passed] }
  expect(countTests(report, 0)).toEqual({ passed: 2, failed: 0 })
})
