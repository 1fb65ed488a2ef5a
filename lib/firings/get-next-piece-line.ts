import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { isFirstOfDay } from '@/lib/firings/first-of-day'
import type { NextPieceLine } from '@/lib/firings/schema'
import { sketchSchema } from '@/lib/firings/sketch'
import { now } from '@/lib/runtime'
import {
  commonDeviation,
  DOSE_RULE,
  firstReachS,
  milestoneTempC,
  MINUTES_RULE,
} from '@/lib/science/next-piece'

/** At most so many of the last firings. */
const lastAtMost = 12

type Piece = { version_id: string; wood_lot: string; is_first_of_day: boolean | null }
type Like = { sketch: unknown; delta_log10_dose: number | null }

/** From the firings most like this one to any of its recipe version. */
const groups = [
  { isSameLot: true, isSameFirst: true },
  { isSameLot: true, isSameFirst: false },
  { isSameLot: false, isSameFirst: true },
  { isSameLot: false, isSameFirst: false },
] as const

/**
 * What the last firings like this piece's next one had in common: of its recipe version (and so of one lead place), its
 * lot, and first of the day or not, where there are enough; else wider. The narrowest group that is large enough
 * decides, also when it has nothing to say: looking on until something is found would find chance.
 * @throws AppError 'not found'
 */
export async function getNextPieceLine(
  actor: Actor,
  input: { id: string },
): Promise<{ line: NextPieceLine | null }> {
  requirePermission(actor, 'firings:follow')
  const em = await forkEm()
  const [piece] = await queryRows<Piece>(
    em,
    `select b.recipe_version_id as version_id, b.wood_lot,
            (select f.is_first_of_day from firings f where f.piece_id = p.id
                and f.state in ('preheating', 'bending', 'toasting', 'resting')) as is_first_of_day
       from pieces p join batches b on b.id = p.batch_id where p.id = ?`,
    [input.id],
  )
  if (piece === undefined) throw new AppError('not found', 'There is no such barrel or head.')
  const isFirst = piece.is_first_of_day ?? (await isFirstOfDay(em, now()))
  for (const group of groups) {
    const like = await readLike(em, piece, isFirst, group)
    if (like.length < MINUTES_RULE.leastCount) continue
    const found = commonOf(like)
    return { line: found === null ? null : { ...found, ...group, isFirstOfDay: isFirst } }
  }
  return { line: null }
}

/** The last of a group, newest first, each with the sketch of its newest score. */
async function readLike(
  em: EntityManager,
  piece: Piece,
  isFirst: boolean,
  { isSameLot, isSameFirst }: (typeof groups)[number],
): Promise<Like[]> {
  return queryRows<Like>(
    em,
    `select s.sketch, s.delta_log10_dose
       from firings f
       join pieces p on p.id = f.piece_id
       join batches b on b.id = p.batch_id
       join lateral (select sketch, delta_log10_dose, verdict from scores where firing_id = f.id
                      order by number desc limit 1) s on s.verdict <> 'incomplete'
      where f.state = 'finished' and not f.is_trial and not f.is_imported and f.recipe_version_id = ?
        ${isSameLot ? 'and b.wood_lot = ?' : ''} ${isSameFirst ? 'and f.is_first_of_day = ?' : ''}
      order by f.toast_at desc, f.id desc limit ?`,
    [piece.version_id, ...(isSameLot ? [piece.wood_lot] : []), ...(isSameFirst ? [isFirst] : []), lastAtMost],
  )
}

type Found = Pick<NextPieceLine, 'what' | 'n' | 'value' | 'low' | 'high' | 'tempC'>

/** The climb first: it is the fire's, and comes before anything that can be done about the dose. */
function commonOf(like: readonly Like[]): Found | null {
  const sketches = like.flatMap(({ sketch }) => {
    const parsed = sketchSchema.safeParse(sketch)
    return parsed.success ? [parsed.data] : []
  })
  const band = sketches[0]?.band ?? []
  if (band.length > 0) {
    const tempC = milestoneTempC(Math.max(...band.map((point) => point.midC)))
    const minutesLate = sketches.flatMap((sketch) => {
      const planned = { timeS: sketch.band.map((p) => p.timeS), tempC: sketch.band.map((p) => p.midC) }
      const planS = firstReachS(planned, tempC)
      const actualS = firstReachS(sketch, tempC)
      return planS === null || actualS === null ? [] : [(actualS - planS) / 60]
    })
    const common = commonDeviation(minutesLate, MINUTES_RULE)
    if (common !== null) return { what: 'minutes to temperature', tempC, ...common }
  }
  const deltas = like.flatMap((one) => (one.delta_log10_dose === null ? [] : [one.delta_log10_dose]))
  const common = commonDeviation(deltas, DOSE_RULE)
  return common === null ? null : { what: 'dose log10', tempC: null, ...common }
}
