import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'
import * as z from 'zod'

const read = (path: string) => readFileSync(fileURLToPath(new URL(path, import.meta.url)), 'utf8')
const faults = z
  .array(
    z.strictObject({
      kind: z.enum(['sign', 'factor', 'off by one', 'unit']),
      name: z.string().min(10),
      file: z.string().regex(/^[a-z0-9-]+\.ts$/),
      from: z.string().min(5),
      to: z.string().min(5),
    }),
  )
  .parse(JSON.parse(read('../planted/faults.json')))

describe('the faults that npm run test:planted plants', () => {
  it.each(faults)('$file: $name', ({ file, from, to }) => {
    // Once: then the fault is the one that its name says, and only that.
    expect(read(`../../lib/science/${file}`).split(from)).toHaveLength(2)
    expect(to).not.toBe(from)
  })
  it('are at least ten, of every kind, each with a name of its own', () => {
    expect(faults.length).toBeGreaterThanOrEqual(10)
    expect(new Set(faults.map(({ kind }) => kind)).size).toBe(4)
    expect(new Set(faults.map(({ name }) => name)).size).toBe(faults.length)
  })
})
