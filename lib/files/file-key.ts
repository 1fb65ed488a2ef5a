import { randomBytes } from 'node:crypto'

/** A key that nobody can guess: 192 random bits under a folder's name. */
export function newFileKey(folder: string, extension: string): string {
  return `${folder}/${randomBytes(24).toString('base64url')}.${extension}`
}
