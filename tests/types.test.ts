import { execFile } from 'node:child_process'
import { promisify } from 'node:util'
import { describe, expect, it } from 'vitest'

const run = promisify(execFile)

describe('types', () => {
  it('the whole tree compiles', { timeout: 600_000 }, async () => {
    const output = await run(
      process.execPath,
      ['node_modules/typescript/bin/tsc', '--noEmit', '--pretty', 'false'],
      {
        maxBuffer: 16 * 1024 * 1024,
      },
    ).then(
      () => '',
      (error: unknown) => String(Reflect.get(Object(error), 'stdout')),
    )
    expect(output).toBe('')
  })
})
