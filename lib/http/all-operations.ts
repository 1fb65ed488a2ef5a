import type { AnyOperation } from '@/lib/http/operation'

/**
 * Every operation of the HTTP surface, area by area: the OpenAPI document and the access test are made from this
 * list. A new area adds its import and its line.
 */
const areas: readonly Record<string, object>[] = []

export const allOperations: readonly AnyOperation[] = areas.flatMap((area) =>
  Object.values(area).map((operation) => operation as AnyOperation),
)
