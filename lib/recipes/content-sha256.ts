import { createHash } from 'node:crypto'
import type { RecipeContent } from '@/lib/recipes/schema'

/**
 * JSON with the keys of every object in code-unit order and no space, so that one content has one text whatever order
 * its keys came in (the database's jsonb keeps none). Numbers are written as JSON.stringify writes them.
 */
export function canonicalJson(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map((item) => canonicalJson(item)).join(',')}]`
  if (typeof value === 'object' && value !== null) {
    const entries = Object.entries(value)
      .filter(([, item]) => item !== undefined)
      .sort(([a], [b]) => (a < b ? -1 : 1))
    return `{${entries.map(([key, item]) => `${JSON.stringify(key)}:${canonicalJson(item)}`).join(',')}}`
  }
  return JSON.stringify(value)
}

/** SHA-256 of a value's canonical JSON, 64 hexadecimal digits. */
export function sha256OfJson(value: unknown): string {
  return createHash('sha256').update(canonicalJson(value), 'utf8').digest('hex')
}

/** SHA-256 of what a recipe version says: the figure that its signatures carry. */
export function contentSha256(content: RecipeContent): string {
  return sha256OfJson(content)
}
