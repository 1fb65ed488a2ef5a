import { countsAsAlarm } from '@/lib/alarms/alarm-kinds'
import { insertAlarmMove } from '@/lib/alarms/insert-alarm-move'
import type { SystemActor } from '@/lib/auth/actor'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import { inTransaction } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { readFiring } from '@/lib/firings/read-firing'
import { firingReadings } from '@/lib/ingest/firing-readings'
import { readFiringFacts } from '@/lib/live/firing-facts'
import { replayAlarms } from '@/lib/live/replay-alarms'

const stepMs = 1_000

/**
 * Writes down the alarms that an ended firing would have had, from its readings, with its own toaster taking note
 * after a while. For firings that were not followed live: those of a seed.
 *
 * @throws AppError 'conflict' for a firing that has not ended or was never started
 */
export async function recordReplayedAlarms(
  actor: SystemActor,
  input: { firingId: string; seenAfterS: number | null },
): Promise<{ alarms: number }> {
  return inTransaction(async (em) => {
    const firing = await readFiring(em, input.firingId)
    const facts = await readFiringFacts(em, input.firingId)
    if (facts === null || facts.endedMs === null) {
      throw new AppError('conflict', 'Only a firing that was started and has ended is replayed.')
    }
    const { series } = await firingReadings(em, input.firingId)
    const seenAfterMs = input.seenAfterS === null ? null : input.seenAfterS * 1000
    const moves = replayAlarms(facts, series, { stepMs, seenAfterMs })
    for (const { isByHand, ...move } of moves) {
      await insertAlarmMove(em, {
        firingId: firing.id,
        ...move,
        accountId: isByHand ? (firing.toaster?.id ?? null) : null,
        shelvedUntilMs: null,
      })
    }
    const alarms = moves.filter((move) => move.from === 'normal' && countsAsAlarm(move.kind)).length
    if (moves.length > 0) {
      await writeAuditEntry(
        em,
        actor,
        'firing.alarms replayed',
        { type: 'firing', id: firing.id },
        { alarms },
      )
    }
    return { alarms }
  })
}
