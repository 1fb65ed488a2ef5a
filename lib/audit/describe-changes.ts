export type Change = { from: unknown; to: unknown }

/** What differs between two plain values of one shape, by path ("rules.dose.zC"); an empty object when nothing does. */
export function describeChanges(before: unknown, after: unknown, path = ''): Record<string, Change> {
  if (isPlainObject(before) && isPlainObject(after)) {
    const keys = [...new Set([...Object.keys(before), ...Object.keys(after)])]
    return Object.assign(
      {},
      ...keys.map((key) => describeChanges(before[key], after[key], path === '' ? key : `${path}.${key}`)),
    )
  }
  if (JSON.stringify(before) === JSON.stringify(after)) return {}
  return { [path]: { from: before ?? null, to: after ?? null } }
}

function isPlainObject(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null && !Array.isArray(value)
}
