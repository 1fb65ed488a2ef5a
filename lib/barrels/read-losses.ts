import type { EntityManager } from '@mikro-orm/postgresql'
import type { LossDto } from '@/lib/barrels/schema'
import type { LossRow } from '@/lib/barrels/to-loss'
import { lossSelect, toLoss } from '@/lib/barrels/to-loss'
import { queryRows } from '@/lib/db/orm'

/** Every loss of a piece in the order in which they came, unauthorised: for verbs that have asked already. */
export async function readLosses(em: EntityManager, pieceId: string): Promise<LossDto[]> {
  const rows = await queryRows<LossRow>(em, `${lossSelect} and l.piece_id = ? order by l.at, l.recorded_at`, [
    pieceId,
  ])
  return rows.map(toLoss)
}
