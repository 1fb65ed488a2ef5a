import { afterEach, beforeEach, expect, vi } from 'vitest'

const calls: unknown[][] = []

beforeEach(() => {
  calls.length = 0
  vi.spyOn(console, 'error').mockImplementation((...args: unknown[]) => {
    calls.push(args)
  })
})

afterEach(() => {
  vi.restoreAllMocks()
  expect(calls, 'console.error was called').toEqual([])
})
