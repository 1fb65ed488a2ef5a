import { randomBytes } from 'node:crypto'
import { changeKept } from './kept.mjs'

const newSecret = () => randomBytes(32).toString('hex')

/**
 * This clone's own secrets, made at first use and kept in `.data/secrets.json`, readable by its owner only.
 *
 * @param {string[]} names
 * @returns {Promise<Record<string, string>>} each 64 hexadecimal digits
 */
export function secrets(names) {
  return changeKept(
    'secrets.json',
    {},
    (known) => ({ ...known, ...Object.fromEntries(names.map((name) => [name, known[name] ?? newSecret()])) }),
    0o600,
  )
}
