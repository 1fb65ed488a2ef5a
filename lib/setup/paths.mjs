import { createHash } from 'node:crypto'
import { chmodSync, mkdirSync, realpathSync } from 'node:fs'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'

/** The clone's own folder, symbolic links resolved, so that one clone has one name. */
export const root = realpathSync(fileURLToPath(new URL('../..', import.meta.url)))

/** Everything that set-up keeps between runs; never committed. */
export const dataDir = join(root, '.data')

/** Tells this clone from every other one on the machine: 12 hexadecimal digits. */
export const cloneHash = createHash('sha256').update(root).digest('hex').slice(0, 12)

export const isRoot = process.getuid?.() === 0

/**
 * Makes `.data`. As root others may pass through it (PostgreSQL runs as another user and must reach its
 * cluster inside) but not list it; otherwise it is private.
 */
export function makeDataDir() {
  mkdirSync(dataDir, { recursive: true })
  if (isRoot) chmodSync(dataDir, 0o711)
  return dataDir
}
