import { createHash } from 'node:crypto'
import { readdirSync, readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'
import { readScienceTestFile } from '../support/published-run'
import { notImplemented } from './not-implemented'
import { publishedIds } from './published-checks'

const folder = fileURLToPath(new URL('.', import.meta.url))
const files = readdirSync(folder)
  .filter((name) => name.endsWith('.test.ts'))
  .map((name) => readScienceTestFile(name, readFileSync(`${folder}/${name}`, 'utf8')))

describe('the account of the published checks', () => {
  it('the set is the one that was handed out, byte for byte', () => {
    const hash = createHash('sha256')
      .update(readFileSync(`${folder}/reference/checks.json`))
      .digest('hex')
    expect(hash).toBe('9087034eb305957d67f7f0965b65ddaaa165ee54361aac53910293e1cca85578')
  })
  it('every published check is run by a test or listed with the reason, and never both', () => {
    const run = new Set(files.flatMap((file) => file.computations))
    const listed = new Set(notImplemented.flatMap((entry) => entry.ids))
    const account = publishedIds.map(({ id, computation }) => {
      const isRun = run.has(computation)
      return isRun === listed.has(id)
        ? `${id} is ${isRun ? 'run and listed' : 'neither run nor listed'}`
        : null
    })
    expect(account.filter((fault) => fault !== null)).toEqual([])
    expect(publishedIds.filter(({ computation }) => run.has(computation)).length).toBeGreaterThan(200)
  })
  it('what is listed exists, under its own computation, once, with a sentence', () => {
    const published = publishedIds.map(({ id, computation }) => `${computation}: ${id}`)
    const listed = notImplemented.flatMap(({ computation, ids }) => ids.map((id) => `${computation}: ${id}`))
    expect(listed.filter((entry) => !published.includes(entry))).toEqual([])
    expect(new Set(listed).size).toBe(listed.length)
    for (const { because } of notImplemented) expect(because).toMatch(/^\p{Lu}.{20,}\.$/u)
  })
  it('no test of the science is left out, and whatever runs a property is named a law', () => {
    expect(files.flatMap((file) => file.faults)).toEqual([])
  })
})

describe('the reader of the account finds what is planted', () => {
  it.each([
    ['a plain call', `testPublished('a.b', () => {})`, { computations: ['a.b'], faults: [] }],
    [
      'a call through a function of the file',
      `const f = (name, g) => testPublished(name, g)\nf('a.b', x)`,
      { computations: ['a.b'], faults: [] },
    ],
    ['a mention', `const name = 'a.b' // testPublished('c.d')`, { computations: [], faults: [] }],
    [
      'a computation that is not written out',
      'testPublished(name, run)',
      { computations: [], faults: ['x.test.ts gives testPublished name, which is not written out'] },
    ],
    ['a test left out', `it.skip('x', () => {})`, { computations: [], faults: ['x.test.ts has it.skip'] }],
    [
      'a law without its name',
      `it('adds up', () => { fc.assert(p) })`,
      {
        computations: [],
        faults: ['x.test.ts: “adds up” runs a property, so its name begins with “law: ”'],
      },
    ],
    [
      'a name without its law',
      `it('law: adds up', () => {})`,
      { computations: [], faults: ['x.test.ts: “law: adds up” is named a law and runs no property'] },
    ],
  ])('%s', (_, text, found) => {
    expect(readScienceTestFile('x.test.ts', text)).toEqual(found)
  })
})
