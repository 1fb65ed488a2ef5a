export type QueryValue = string | readonly string[] | undefined
export type Query = Readonly<Record<string, QueryValue>>

/**
 * The address of the same list with some of its query changed: what is given replaces, null removes, the
 * rest (search, filters) stays. A change of anything but the cursor goes back to the first page.
 */
export function changeQuery(
  pathname: string,
  query: Query,
  changes: Readonly<Record<string, string | null>>,
): string {
  const next = new URLSearchParams()
  for (const [key, value] of Object.entries(query)) {
    if (value === undefined || key in changes) continue
    if (key === 'cursor' && Object.keys(changes).length > 0) continue
    for (const one of typeof value === 'string' ? [value] : value) next.append(key, one)
  }
  for (const [key, value] of Object.entries(changes)) if (value !== null && value !== '') next.set(key, value)
  const text = next.toString()
  return text === '' ? pathname : `${pathname}?${text}`
}

/** The address of the next page of a list, or undefined on the last one. */
export function nextPageHref(pathname: string, query: Query, nextCursor: string | null): string | undefined {
  return nextCursor === null ? undefined : changeQuery(pathname, query, { cursor: nextCursor })
}

export type Sort = { key: string; direction: 'asc' | 'desc' }

/** "name" sorts upwards, "-name" downwards, as the URL has it. */
export function readSort(text: QueryValue, fallback: Sort): Sort {
  if (typeof text !== 'string' || text === '') return fallback
  return text.startsWith('-') ? { key: text.slice(1), direction: 'desc' } : { key: text, direction: 'asc' }
}

/** The inverse of {@link readSort}. */
export function writeSort(sort: Sort): string {
  return sort.direction === 'desc' ? `-${sort.key}` : sort.key
}
