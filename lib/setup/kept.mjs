import { randomBytes } from 'node:crypto'
import { mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { dataDir, makeDataDir } from './paths.mjs'
import { withLock } from './lock.mjs'
import { SetupError } from './say.mjs'

/** A small JSON file under `.data`, or `fallback` when it is not there yet. */
export function readKept(name, fallback) {
  const path = join(dataDir, name)
  let text
  try {
    text = readFileSync(path, 'utf8')
  } catch (error) {
    if (error.code === 'ENOENT') return fallback
    throw error
  }
  try {
    return JSON.parse(text)
  } catch {
    throw new SetupError(`${path} is damaged.`, 'Remove that file, then run this again.')
  }
}

/** Writes it whole or not at all. */
export function keep(name, value, mode = 0o644) {
  makeDataDir()
  const path = join(dataDir, name)
  mkdirSync(dirname(path), { recursive: true })
  const draft = `${path}.${process.pid}.${randomBytes(4).toString('hex')}`
  writeFileSync(draft, `${JSON.stringify(value, null, 2)}\n`, { mode })
  renameSync(draft, path)
}

/** Reads, changes and writes one file while no other run of this clone does. */
export function changeKept(name, fallback, change, mode) {
  return withLock(`file ${name}`, async () => {
    const before = readKept(name, fallback)
    const after = await change(before)
    if (JSON.stringify(after) !== JSON.stringify(before)) keep(name, after, mode)
    return after
  })
}
