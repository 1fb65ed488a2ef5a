import type { Actor } from '@/lib/auth/actor'
import { isAppError } from '@/lib/errors'
import type { Comparison } from '@/lib/firings/compare-firings'
import { compareFirings, fewestCompared, mostCompared } from '@/lib/firings/compare-firings'
import { getFiring } from '@/lib/firings/get-firing'
import { listFirings } from '@/lib/firings/list-firings'
import type { FiringSummary } from '@/lib/firings/schema'

export type Overlay = {
  comparison: Comparison | null
  /** Why these cannot be laid over one another: one sentence, and by firing id what stands in the way. */
  refusal: { detail: string; byId: Readonly<Record<string, string>> } | null
  /** Firings of the same recipe version that could be added, newest first. */
  candidates: FiringSummary[]
}

const candidateCount = 12

/** The page of an overlay: the comparison, or in words why there is none, and what could be added. */
export async function getOverlay(actor: Actor, input: { ids: readonly string[] }): Promise<Overlay> {
  const candidates = await readCandidates(actor, input.ids)
  if (input.ids.length < fewestCompared) return { comparison: null, refusal: null, candidates }
  try {
    return { comparison: await compareFirings(actor, input), refusal: null, candidates }
  } catch (error) {
    if (!isAppError(error) || error.kind === 'not allowed' || error.kind === 'unavailable') throw error
    return { comparison: null, refusal: { detail: error.detail, byId: error.fields }, candidates }
  }
}

async function readCandidates(actor: Actor, ids: readonly string[]): Promise<FiringSummary[]> {
  const [first] = ids
  if (first === undefined || ids.length >= mostCompared) return []
  const firing = await getFiring(actor, { id: first }).catch(nothingWhenUnknown)
  if (firing === null) return []
  const page = await listFirings(actor, {
    state: 'fired',
    versionId: firing.recipe.versionId,
    limit: candidateCount + ids.length,
  })
  return page.items.filter((one) => one.score !== null && !ids.includes(one.id)).slice(0, candidateCount)
}

function nothingWhenUnknown(error: unknown): null {
  if (isAppError(error) && error.kind === 'not found') return null
  throw error
}
