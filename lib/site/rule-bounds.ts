import * as z from 'zod'
import { siteRulesSchema } from '@/lib/science/site-rules'

/** The least and the most of each rule by its path, read from the schema, so that a form says what the server holds. */
export function ruleBounds(): Record<string, { min?: number; max?: number }> {
  const bounds: Record<string, { min?: number; max?: number }> = {}
  collect(z.toJSONSchema(siteRulesSchema), '', bounds)
  return bounds
}

function collect(
  schema: unknown,
  path: string,
  bounds: Record<string, { min?: number; max?: number }>,
): void {
  if (typeof schema !== 'object' || schema === null) return
  const properties: unknown = Reflect.get(schema, 'properties')
  if (typeof properties === 'object' && properties !== null) {
    for (const [key, child] of Object.entries(properties))
      collect(child, path === '' ? key : `${path}.${key}`, bounds)
    return
  }
  const min = numberOf(schema, 'minimum') ?? numberOf(schema, 'exclusiveMinimum')
  const max = numberOf(schema, 'maximum')
  bounds[path] = { ...(min === undefined ? {} : { min }), ...(max === undefined ? {} : { max }) }
}

function numberOf(schema: object, key: string): number | undefined {
  const value: unknown = Reflect.get(schema, key)
  return typeof value === 'number' && Math.abs(value) < 1e12 ? value : undefined
}
