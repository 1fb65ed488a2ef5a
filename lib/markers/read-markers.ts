import type { EntityManager } from '@mikro-orm/postgresql'
import { queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import type { MarkerDetail, MarkerDto } from '@/lib/markers/schema'
import type { MarkerRow, ResponseRow } from '@/lib/markers/to-marker'
import { responseSelect, toMarker, toResponse } from '@/lib/markers/to-marker'
import type { FormulaSymbol } from '@/lib/science/formula-symbols'
import { lotAssaySymbol } from '@/lib/science/formula-symbols'

const markerSelect = 'select id, key, name, unit from markers'

export function markerNotFound(): AppError {
  return new AppError('not found', 'There is no such marker.')
}

/** Every marker in order with the response in force, unauthorised. */
export async function readMarkers(em: EntityManager): Promise<MarkerDto[]> {
  const [markers, responses] = await Promise.all([
    queryRows<MarkerRow>(em, `${markerSelect} order by position`),
    queryRows<ResponseRow>(
      em,
      `${responseSelect}
        where r.number = (select max(number) from marker_responses where marker_id = r.marker_id)`,
    ),
  ])
  return markers.map((marker) => {
    const row = responses.find((response) => response.marker_id === marker.id)
    return toMarker(marker, row === undefined ? null : toResponse(row))
  })
}

/** One marker with all its responses, the newest first, unauthorised. @throws AppError 'not found' */
export async function readMarker(em: EntityManager, id: string): Promise<MarkerDetail> {
  const [row] = await queryRows<MarkerRow>(em, `${markerSelect} where id = ?`, [id])
  if (row === undefined) throw markerNotFound()
  const rows = await queryRows<ResponseRow>(
    em,
    `${responseSelect} where r.marker_id = ? order by r.number desc`,
    [id],
  )
  const responses = rows.map(toResponse)
  return { ...toMarker(row, responses[0] ?? null), responses }
}

/** The symbols that formulas have for lot assays: one for each marker of the list. */
export async function readLotSymbols(em: EntityManager): Promise<FormulaSymbol[]> {
  const rows = await queryRows<MarkerRow>(em, `${markerSelect} order by position`)
  return rows.map((row) => lotAssaySymbol(toMarker(row, null)))
}
