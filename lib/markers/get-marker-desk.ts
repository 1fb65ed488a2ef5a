import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { readLotSymbols, readMarker } from '@/lib/markers/read-markers'
import type { MarkerDetail } from '@/lib/markers/schema'
import type { LeadPlace } from '@/lib/recipes/schema'
import { leadPlaceSchema } from '@/lib/recipes/schema'
import type { FormulaFunction, FormulaSymbol } from '@/lib/science/formula-symbols'
import { formulaFunctions, formulaSymbols } from '@/lib/science/formula-symbols'
import { currentSite } from '@/lib/site/current-site'

/** Everything that the page of a marker shows. */
export type MarkerDesk = {
  marker: MarkerDetail
  symbols: readonly Pick<FormulaSymbol, 'name' | 'unit' | 'meaning'>[]
  functions: readonly Pick<FormulaFunction, 'name' | 'form' | 'meaning'>[]
  /** Where most approved recipes read, to begin a fit with. */
  usualPlace: LeadPlace
  timeZone: string
  canWrite: boolean
}

/** A marker with what its editor and its fit need beside it. @throws AppError 'not found' */
export async function getMarkerDesk(actor: Actor, input: { id: string }): Promise<MarkerDesk> {
  requirePermission(actor, 'markers:read')
  const em = await forkEm()
  const marker = await readMarker(em, input.id)
  const lotSymbols = await readLotSymbols(em)
  const [place] = await queryRows<Record<string, unknown>>(
    em,
    `select lead_height as height, lead_side as side, lead_depth_mm as "depthMm", lead_mounting as mounting
       from recipe_versions where state = 'approved'
      group by 1, 2, 3, 4 order by count(*) desc, 1, 2, 3, 4 limit 1`,
  )
  return {
    marker,
    symbols: [...formulaSymbols, ...lotSymbols].map(({ name, unit, meaning }) => ({ name, unit, meaning })),
    functions: formulaFunctions.map(({ name, form, meaning }) => ({ name, form, meaning })),
    usualPlace:
      place === undefined
        ? { height: 'bilge', side: 'A', depthMm: 2, mounting: 'wedge' }
        : leadPlaceSchema.parse(place),
    timeZone: (await currentSite(em)).timeZone,
    canWrite: isAllowed(actor, 'markers:write'),
  }
}
