import type { EntityManager } from '@mikro-orm/postgresql'
import { queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import type { FiringDto, MarkDto } from '@/lib/firings/schema'
import type { FiringDetailRow, FiringProbeRow } from '@/lib/firings/to-firing'
import { firingSelect, toFiring } from '@/lib/firings/to-firing'
import type { MarkRow } from '@/lib/firings/to-mark'
import { markSelect, toMarks } from '@/lib/firings/to-mark'

const detailSelect = firingSelect.replace(
  'select f.id,',
  `select f.recipe_copy, f.recipe_sha256, f.site_settings_version, f.moisture_percent, f.moisture_method, f.colour,
          f.smell, f.outside_temp_c, f.remarks, f.id,`,
)

/** The marks of a firing in the order in which they happened. */
export async function readMarks(em: EntityManager, firingId: string): Promise<MarkDto[]> {
  const rows = await queryRows<MarkRow>(
    em,
    `${markSelect} where m.firing_id = ? order by m.at, m.recorded_at`,
    [firingId],
  )
  return toMarks(rows)
}

/** The probes of a firing, each for its period. */
async function readProbeRows(em: EntityManager, firingId: string): Promise<FiringProbeRow[]> {
  return queryRows<FiringProbeRow>(
    em,
    `select fp.probe_id, q.no, q.name, fp.role, q.thermocouple_type, q.iec_class, fp.height, fp.side, fp.depth_mm,
            fp.mounting, fp.from_at, fp.until_at
       from firing_probes fp join probes q on q.id = fp.probe_id
      where fp.firing_id = ? order by array_position(array['lead', 'opposite', 'coals'], fp.role), fp.from_at`,
    [firingId],
  )
}

/** The whole of one firing, unauthorised: for verbs that have asked already. @throws AppError 'not found' */
export async function readFiring(em: EntityManager, id: string): Promise<FiringDto> {
  const [row] = await queryRows<FiringDetailRow>(em, `${detailSelect} where f.id = ?`, [id])
  if (row === undefined) throw new AppError('not found', 'There is no such firing.')
  return toFiring(row, await readProbeRows(em, id), await readMarks(em, id))
}
