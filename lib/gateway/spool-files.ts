import {
  closeSync,
  fsyncSync,
  mkdirSync,
  openSync,
  readFileSync,
  readdirSync,
  rmSync,
  writeSync,
} from 'node:fs'
import { join } from 'node:path'

/**
 * The few things a spool asks of a disk, so that tests can fill it, tear it and cut it short.
 * `append` either writes all bytes or throws; what it wrote before throwing may stay behind as a torn tail.
 */
export type SpoolFiles = {
  list: () => string[]
  read: (name: string) => Buffer
  append: (name: string, bytes: Buffer) => void
  remove: (name: string) => void
  /** Makes everything appended so far outlive a loss of power. */
  flush: () => void
}

/** A folder on a real disk. Open files are kept open while they are written to. */
export function openSpoolFolder(folder: string): SpoolFiles & { close: () => void } {
  mkdirSync(folder, { recursive: true })
  const open = new Map<string, number>()
  const unflushed = new Set<number>()

  const fileFor = (name: string): number => {
    const known = open.get(name)
    if (known !== undefined) return known
    const file = openSync(join(folder, name), 'a')
    open.set(name, file)
    return file
  }
  const closeFile = (name: string) => {
    const file = open.get(name)
    if (file === undefined) return
    unflushed.delete(file)
    open.delete(name)
    closeSync(file)
  }
  const flush = () => {
    for (const file of unflushed) fsyncSync(file)
    unflushed.clear()
  }

  return {
    list: () => readdirSync(folder),
    read: (name) => readFileSync(join(folder, name)),
    append: (name, bytes) => {
      const file = fileFor(name)
      unflushed.add(file)
      for (let written = 0; written < bytes.length;) {
        written += writeSync(file, bytes, written, bytes.length - written)
      }
    },
    remove: (name) => {
      closeFile(name)
      rmSync(join(folder, name), { force: true })
    },
    flush,
    close: () => {
      flush()
      for (const name of [...open.keys()]) closeFile(name)
    },
  }
}
