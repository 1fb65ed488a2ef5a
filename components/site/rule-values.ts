import type { SiteRules } from '@/lib/science/site-rules'

export type Bounds = Readonly<Record<string, { min?: number; max?: number }>>

/** The value at a path such as "dose.zC"; undefined when there is none. */
export function readAt(rules: unknown, path: string): unknown {
  return path
    .split('.')
    .reduce<unknown>(
      (value, key) => (typeof value === 'object' && value !== null ? Reflect.get(value, key) : undefined),
      rules,
    )
}

/** The rules with one value changed; the rest is shared. */
export function writeAt(rules: SiteRules, path: string, value: unknown): SiteRules {
  const copy = structuredClone(rules)
  const keys = path.split('.')
  const last = keys.pop()
  const holder = readAt(copy, keys.join('.')) ?? (keys.length === 0 ? copy : undefined)
  if (last === undefined || typeof holder !== 'object' || holder === null) return rules
  Reflect.set(holder, last, value)
  return copy
}
