import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { expect, it } from 'vitest'
import * as z from 'zod'

/**
 * The published check values of `reference/checks.json`, by id. Each becomes a test whose title names its source, and
 * says 'from memory' where the printed value was recalled and not seen.
 */
const checkSchema = z.object({
  id: z.string(),
  computation: z.string(),
  inputs: z.record(z.string(), z.unknown()),
  expected: z.unknown(),
  tolerance: z.union([z.literal('exact'), z.record(z.string(), z.unknown())]),
  source: z.string(),
  status: z.string(),
})

export type PublishedCheck = z.infer<typeof checkSchema>

const checks = z
  .array(checkSchema)
  .parse(JSON.parse(readFileSync(fileURLToPath(new URL('./reference/checks.json', import.meta.url)), 'utf8')))

/** Every published check's id and computation, for the account of what is run. */
export const publishedIds: readonly { id: string; computation: string }[] = checks.map(
  ({ id, computation }) => ({ id, computation }),
)

/** One published check by its id, for a test that uses a part of it. */
export function publishedCheck(id: string): PublishedCheck {
  const found = checks.find((check) => check.id === id)
  if (found === undefined) throw new Error(`There is no published check ${id}`)
  return found
}

/** Schemas for the shapes that inputs and expectations have. */
export const numberShape = z.number()
export const numbersShape = z.array(z.number())
export const tableShape = z.array(z.array(z.number()))

/** Tolerance of a check under `key`, `abs` or `rel`. */
export function toleranceOf(check: PublishedCheck, key: string): number {
  if (check.tolerance === 'exact') return 0
  return numberShape.parse(check.tolerance[key])
}

/** Whether `actual` lies within the check's `abs` or `rel` tolerance of `expected`. */
export function expectClose(check: PublishedCheck, actual: number, expected: number): void {
  const isRelative = check.tolerance !== 'exact' && 'rel' in check.tolerance
  const allowed = isRelative ? toleranceOf(check, 'rel') * Math.abs(expected) : toleranceOf(check, 'abs')
  expectWithin(actual, expected, allowed)
}

/** Fails unless |actual − expected| ≤ allowed. */
export function expectWithin(actual: number, expected: number, allowed: number): void {
  const off = Math.abs(actual - expected)
  if (!(off <= allowed)) expect.fail(`${actual} is ${off} from ${expected}; ${allowed} is allowed`)
}

/**
 * Registers one test per check of a computation, or only that of one id; fails when there are none, so that a renamed
 * one cannot vanish.
 */
export function testPublished(
  computation: string,
  run: (check: PublishedCheck) => void,
  onlyId?: string,
): void {
  const found = checks.filter(
    (check) => check.computation === computation && (onlyId === undefined || check.id === onlyId),
  )
  if (found.length === 0) throw new Error(`There is no published check for ${computation}`)
  for (const check of found) {
    const memory = check.status.includes('memory') ? '; from memory' : ''
    it(`${check.id}: ${check.source}${memory}`, () => run(check))
  }
}

/** The fixed seed of every property test; fast-check prints it with a counterexample. */
export const propertyRun = { seed: 20_260_101, numRuns: 200 } as const

/** Expects a RangeError whose message has the argument's name. */
export function expectRangeError(argument: string, run: () => unknown): void {
  expect(run).toThrow(RangeError)
  expect(run).toThrow(argument)
}

/** The numbers that no function may take. */
export const notNumbers = [NaN, Infinity, -Infinity]
