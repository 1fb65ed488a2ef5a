import type { SearchParams } from '@/lib/http/page-query'

const uuid = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i

/** The firings that an overlay's address names, each once, in order, and the one that is picked out. */
export async function readOverlayIds(
  searchParams: SearchParams,
): Promise<{ ids: string[]; pickedId: string | null }> {
  const { id, pick } = await searchParams
  const given = id === undefined ? [] : typeof id === 'string' ? [id] : id
  const ids = [...new Set(given.filter((one) => uuid.test(one)))]
  return { ids, pickedId: typeof pick === 'string' && ids.includes(pick) ? pick : null }
}

/** The address of an overlay. */
export function overlayHref(ids: readonly string[], pickedId: string | null = null): string {
  const query = new URLSearchParams(ids.map((id) => ['id', id]))
  if (pickedId !== null && ids.includes(pickedId)) query.set('pick', pickedId)
  return query.size === 0 ? '/firings/overlay' : `/firings/overlay?${query.toString()}`
}
