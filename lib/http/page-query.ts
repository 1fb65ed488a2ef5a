import type * as z from 'zod'

export type SearchParams = Promise<Record<string, string | string[] | undefined>>

/**
 * A page's query through the operation's own schema. Empty values are left out (a form sends them); one that does
 * not fit is left out too, and said, so that an old link still opens.
 */
export async function readPageQuery<T>(
  schema: z.ZodType<T>,
  searchParams: SearchParams,
): Promise<{ query: T; raw: Record<string, string>; faults: string[] }> {
  const raw: Record<string, string> = {}
  for (const [key, value] of Object.entries(await searchParams)) {
    const one = Array.isArray(value) ? value[0] : value
    if (one !== undefined && one !== '') raw[key] = one
  }
  const parsed = schema.safeParse(raw)
  if (parsed.success) return { query: parsed.data, raw, faults: [] }
  const bad = new Set(
    parsed.error.issues.flatMap((issue) =>
      issue.code === 'unrecognized_keys' ? issue.keys : [String(issue.path[0])],
    ),
  )
  const kept = Object.fromEntries(Object.entries(raw).filter(([key]) => !bad.has(key)))
  return {
    query: schema.parse(kept),
    raw: kept,
    faults: [...bad].map((key) => `The filter "${key}" does not fit and was left out.`),
  }
}
