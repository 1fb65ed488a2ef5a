import type { Actor } from '@/lib/auth/actor'
import { forkEm } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { getFiring } from '@/lib/firings/get-firing'
import { isLive } from '@/lib/firings/firing-states'
import type { ScoreDto } from '@/lib/firings/read-score'
import { readScore } from '@/lib/firings/read-score'

export type { ScoreDto }

/** The newest score of a firing that the actor may read. @throws AppError 'not found' while there is none, saying why */
export async function getScore(actor: Actor, input: { id: string }): Promise<ScoreDto> {
  const firing = await getFiring(actor, input)
  const score = await readScore(await forkEm(), input.id)
  if (score === null) {
    if (firing.state === 'abandoned') throw new AppError('not found', 'An abandoned firing has no score.')
    if (firing.state === 'queued' || isLive(firing.state)) {
      throw new AppError('not found', 'There is no score before the firing is finished.')
    }
    throw new AppError(
      'not found',
      'The score is made once the gateway has sent the last readings. Look again in a moment.',
    )
  }
  return score
}
