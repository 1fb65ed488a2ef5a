import { readFileSync, writeFileSync } from 'node:fs'
import * as z from 'zod'
import { systemActor } from '@/lib/auth/actor'
import { closeOrm } from '@/lib/db/orm'
import { scoreFiring } from '@/lib/firings/score-firing'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { sealFiring } from '@/lib/ingest/seal-firing'
import { storeReadings } from '@/lib/ingest/store-readings'

/*
 * The run without faults: the same readings through the same ingest, one boot after the other, in order, into a
 * database whose firings are there and whose readings are not; then sealed and scored. A process of its own, since a
 * process has one database.
 */

export const cleanTaskSchema = z.object({
  boots: z.array(
    z.object({
      gatewayId: z.uuid(),
      bootId: z.uuid(),
      readings: z.array(
        z.object({
          seq: z.number(),
          probeId: z.uuid(),
          atMs: z.number(),
          emfTenthUv: z.number(),
          coldCentiC: z.number(),
        }),
      ),
    }),
  ),
  firingIds: z.array(z.uuid()),
})
export type CleanTask = z.infer<typeof cleanTaskSchema>

const readingsAMessage = 2_000

const [taskPath, donePath] = process.argv.slice(2)
if (taskPath !== undefined && donePath !== undefined) {
  const task = cleanTaskSchema.parse(JSON.parse(readFileSync(taskPath, 'utf8')))
  for (const boot of task.boots) await store(boot)
  for (const id of task.firingIds) {
    await sealFiring(id)
    await scoreFiring(systemActor('faults suite'), { id })
  }
  await closeIngestPool()
  await closeOrm()
  writeFileSync(donePath, 'done')
}

async function store({ gatewayId, bootId, readings }: CleanTask['boots'][number]): Promise<void> {
  // A gateway that replays has no clock offset: instants are those that were stored.
  const gateway = { gatewayId, name: 'clean', mayReplay: true }
  for (let from = 0; from < readings.length; from += readingsAMessage) {
    const part = readings.slice(from, from + readingsAMessage)
    const answer = await storeReadings(gateway, {
      bootId,
      sentAt: new Date().toISOString(),
      readings: part.map((one) => ({
        seq: one.seq,
        probeId: one.probeId,
        at: new Date(one.atMs).toISOString(),
        emf: { microvolts: one.emfTenthUv / 10, coldJunctionC: one.coldCentiC / 100 },
      })),
    })
    if (answer.refused.length > 0) throw new Error(`refused: ${answer.refused[0]?.reason}`)
  }
}
