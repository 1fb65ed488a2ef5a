import { existsSync, readFileSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'
import ts from 'typescript'
import { expect, it } from 'vitest'

const root = fileURLToPath(new URL('../../', import.meta.url))

/** Every package that a file brings in, through our own files. */
function packagesOf(start: string): Set<string> {
  const packages = new Set<string>()
  const files = new Set([start])
  for (const file of files) {
    for (const { fileName: specifier } of ts.preProcessFile(readFileSync(join(root, file), 'utf8'))
      .importedFiles) {
      const isOwn = specifier.startsWith('.') || specifier.startsWith('@/')
      if (!isOwn) {
        if (!specifier.startsWith('node:')) packages.add(specifier)
        continue
      }
      const path = specifier.startsWith('.') ? join(dirname(file), specifier) : specifier.slice(2)
      if (path.endsWith('.json')) continue
      expect(existsSync(join(root, `${path}.ts`)), `${file} imports ${specifier}`).toBe(true)
      files.add(`${path}.ts`)
    }
  }
  return packages
}

it('the gateway program runs on a box without the database and without the pages', () => {
  expect([...packagesOf('lib/gateway/main.ts')].sort()).toEqual(['modbus-serial', 'socket.io-client', 'zod'])
})
