import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'
import { architectureOffences } from '@/tests/support/architecture'

const root = fileURLToPath(new URL('..', import.meta.url))
const folders = ['app', 'components', 'entities', 'lib', 'migrations', 'simulators', 'tests']

function readSources(): Map<string, string> {
  const deep = folders.flatMap((folder) =>
    readdirSync(join(root, folder), { recursive: true, encoding: 'utf8' }).map((name) => `${folder}/${name}`),
  )
  const loose = readdirSync(root).filter((name) => !name.endsWith('.d.ts'))
  const paths = [...loose, ...deep].filter((path) => /\.(ts|tsx|mjs)$/.test(path) && !/(^|\/)\./.test(path))
  return new Map(paths.map((path) => [path, readFileSync(join(root, path), 'utf8')]))
}

it('the project keeps its own rules of direction, size and names', () => {
  const sources = readSources()
  expect(sources.size).toBeGreaterThan(50)
  expect(architectureOffences(sources)).toEqual([])
}, 120_000)

describe('the checker finds what is planted', () => {
  const lines = (count: number) => Array.from({ length: count }, () => 'const x = 1').join('\n') + '\n'
  const planted: [rule: string, path: string, text: string, sentence: string][] = [
    [
      'science imports an area',
      'lib/science/a.ts',
      `import { x } from '../firings/x'`,
      'lib/science is pure',
    ],
    ['science imports React', 'lib/science/a.ts', `import { x } from 'react'`, 'lib/science is pure'],
    ['science reads a file', 'lib/science/a.ts', `import { x } from 'node:fs'`, 'lib/science is pure'],
    [
      'science imports by alias',
      'lib/science/a.ts',
      `import { x } from '@/lib/science/b'`,
      'imports are relative',
    ],
    ['an entity imports an area', 'entities/a.ts', `import { x } from '@/lib/firings/b'`, 'at the bottom'],
    ['lib imports a page', 'lib/firings/a.ts', `import { x } from '@/app/page'`, 'lib is below'],
    [
      'lib imports a component',
      'lib/firings/a.ts',
      `import type { X } from '@/components/ui/b'`,
      'lib is below',
    ],
    [
      'lib imports a simulator later',
      'lib/firings/a.ts',
      `await import('@/simulators/hearth/b')`,
      'lib is below',
    ],
    ['lib imports a test', 'lib/firings/a.ts', `export { x } from '@/tests/support/b'`, 'lib is below'],
    [
      'an area imports a migration',
      'lib/firings/a.ts',
      `import { x } from '@/migrations/list'`,
      'only lib/db',
    ],
    [
      'a component imports an entity',
      'components/ui/a.tsx',
      `import { x } from '@/entities/b'`,
      'no database code',
    ],
    [
      'a component imports the ORM',
      'components/ui/a.tsx',
      `import type { X } from '@mikro-orm/core'`,
      'no database code',
    ],
    [
      'a component imports lib/db',
      'components/ui/a.tsx',
      `import { x } from '@/lib/db/orm'`,
      'no database code',
    ],
    ['a page imports an entity', 'app/page.tsx', `import { x } from '@/entities/b'`, 'through lib/<area>'],
    ['the server imports pg', 'server.ts', `import { Client } from 'pg'`, 'through lib/<area>'],
    [
      'a page imports a simulator',
      'app/page.tsx',
      `import { x } from '@/simulators/hearth/b'`,
      'does not depend',
    ],
    ['a simulator imports a page', 'simulators/mail/a.ts', `import { x } from '@/app/b'`, 'stand outside'],
    ['a path out of the folder', 'lib/firings/a.ts', `import { x } from '../db/orm'`, 'is written @/'],
    ['zod whole', 'lib/firings/a.ts', `import { z } from 'zod'`, 'import * as z'],
    ['server-only', 'lib/firings/a.ts', `import 'server-only'`, 'throws under tsx'],
    ['a barrel', 'lib/firings/index.ts', `export const x = 1`, 'is an index file'],
    ['a file of leftovers', 'lib/firings/utils.ts', `export const x = 1`, 'says nothing'],
    ['camel case', 'lib/firings/startFiring.ts', `export const x = 1`, 'kebab-case'],
    ['a long page', 'app/(staff)/firings/page.tsx', lines(41), '41 lines'],
    ['a long route', 'app/api/firings/[id]/route.ts', lines(41), '41 lines'],
    ['a long server', 'server.ts', lines(81), '81 lines'],
    [
      'two verbs in a file',
      'lib/firings/start-firing.ts',
      `export async function startFiring(actor: Actor) {}\nexport async function finishFiring(actor: Actor) {}`,
      'exports 2 verbs',
    ],
  ]

  it.each(planted)('%s', (_rule, path, text, sentence) => {
    const offences = architectureOffences(new Map([[path, text]]))
    expect(offences.map((offence) => offence.includes(sentence))).toContain(true)
    expect(offences.every((offence) => offence.startsWith(path))).toBe(true)
  })

  it('mathjs, which a page never needs, however a component comes by it', () => {
    const sources = new Map([
      ['components/markers/a.tsx', `import { b } from '@/lib/science/b'`],
      ['lib/science/b.ts', `import { create } from 'mathjs/number'`],
    ])
    expect(architectureOffences(sources)).toEqual([
      'components/markers/a.tsx drags in mathjs/number through lib/science/b.ts',
    ])
  })

  it('database code that a component reaches by two steps', () => {
    const sources = new Map([
      ['components/fireside/a.tsx', `import { b } from '@/lib/firings/b'`],
      ['lib/firings/b.ts', `import { orm } from '@/lib/db/orm'\nexport const b = orm`],
      ['lib/db/orm.ts', `export const orm = 1`],
    ])
    expect(architectureOffences(sources)).toEqual([
      'components/fireside/a.tsx drags in lib/db/orm.ts through lib/firings/b.ts',
    ])
  })
})

describe('the checker leaves alone what is allowed', () => {
  const allowed: [what: string, sources: [string, string][]][] = [
    ['a page of 40 lines', [['app/page.tsx', 'const x = 1\n'.repeat(40)]]],
    [
      'science with a package and itself',
      [['lib/science/a.ts', `import { Matrix } from 'ml-matrix'\nimport { b } from './b'`]],
    ],
    [
      'an area with entities and science',
      [['lib/firings/a.ts', `import { x } from '@/entities/b'\nimport { y } from '@/lib/science/c'`]],
    ],
    [
      'one verb and its pure parts',
      [
        [
          'lib/firings/start-firing.ts',
          `export async function a(actor: Actor) {}\nexport async function b(em: Em) {}`,
        ],
      ],
    ],
    [
      'a component that takes only a type from a verb',
      [
        ['components/a.tsx', `import type { B } from '@/lib/firings/b'`],
        ['lib/firings/b.ts', `import { orm } from '@/lib/db/orm'`],
        ['lib/db/orm.ts', ''],
      ],
    ],
    ['a route by its brackets', [['app/api/firings/[id]/route.ts', `import { x } from '@/lib/firings/a'`]]],
  ]

  it.each(allowed)('%s', (_what, sources) => {
    expect(architectureOffences(new Map(sources))).toEqual([])
  })
})
