import { createHash, randomBytes } from 'node:crypto'
import { mkdir, readFile, rename, rm, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import * as z from 'zod'

export type StoredObject = { key: string; contentType: string; sha256: string; bytes: Buffer }

export type ObjectFolder = {
  put: (key: string, bytes: Buffer, contentType: string) => Promise<string>
  /** Null when there is none. */
  get: (key: string) => Promise<StoredObject | null>
  remove: (key: string) => Promise<void>
}

const describedSchema = z.object({ key: z.string(), contentType: z.string(), sha256: z.string() })

/** Objects in a folder, one file each beside one that describes it; named by their key's hash, so that any key fits. */
export function openObjectFolder(folder: string): ObjectFolder {
  const pathOf = (key: string) => join(folder, createHash('sha256').update(key).digest('hex'))

  return {
    put: async (key, bytes, contentType) => {
      await mkdir(folder, { recursive: true })
      const sha256 = createHash('sha256').update(bytes).digest('hex')
      await writeWhole(pathOf(key), bytes)
      await writeWhole(`${pathOf(key)}.json`, JSON.stringify({ key, contentType, sha256 }))
      return sha256
    },
    get: async (key) => {
      try {
        const described = describedSchema.parse(JSON.parse(await readFile(`${pathOf(key)}.json`, 'utf8')))
        return { ...described, bytes: await readFile(pathOf(key)) }
      } catch (error) {
        if (isAbsent(error)) return null
        throw error
      }
    },
    remove: async (key) => {
      // What describes it goes first: an object without is not there.
      await rm(`${pathOf(key)}.json`, { force: true })
      await rm(pathOf(key), { force: true })
    },
  }
}

async function writeWhole(path: string, content: Buffer | string): Promise<void> {
  const draft = `${path}.${randomBytes(4).toString('hex')}.new`
  await writeFile(draft, content)
  await rename(draft, path)
}

function isAbsent(error: unknown): boolean {
  return typeof error === 'object' && error !== null && Reflect.get(error, 'code') === 'ENOENT'
}
