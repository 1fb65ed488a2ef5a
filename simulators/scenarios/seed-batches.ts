import { recordReplayedAlarms } from '@/lib/alarms/record-replayed-alarms'
import type { PersonActor } from '@/lib/auth/actor'
import { systemActor } from '@/lib/auth/actor'
import { createBatch } from '@/lib/batches/create-batch'
import { listPieces } from '@/lib/batches/list-pieces'
import { scoreFiring } from '@/lib/firings/score-firing'
import { sealFiring } from '@/lib/ingest/seal-firing'
import { setClock } from '@/lib/runtime'
import type { Random } from '@/simulators/hearth/random'
import type { DemoBatch } from '@/simulators/scenarios/demo-history'
import { playFiring, plannedFiringS } from '@/simulators/scenarios/play-firing'
import type { RecipeHistory, SeedVersion } from '@/simulators/scenarios/seed-recipes'
import type { SeedHearth, SeedRoom } from '@/simulators/scenarios/seed-room'

export type BatchCast = {
  masterCooper: PersonActor
  toasters: readonly PersonActor[]
  customerIds: readonly string[]
  room: SeedRoom
  recipes: RecipeHistory
  random: Random
}

const dayMs = 86_400_000
const seed = systemActor('set-up')

/** Toasting goes on from Monday to Friday. */
function nextWorkday(at: Date): Date {
  const day = at.getUTCDay()
  return new Date(at.getTime() + (day === 6 ? 2 : day === 0 ? 1 : 0) * dayMs)
}

/** The version that stood approved at the time. */
function versionAt(versions: readonly SeedVersion[], recipe: number, at: Date): SeedVersion {
  const found = versions
    .filter(
      (version) => version.recipeIndex === recipe && version.approvedAt !== null && version.approvedAt <= at,
    )
    .at(-1)
  if (found === undefined)
    throw new Error(`No version of recipe ${recipe} was approved by ${at.toISOString()}.`)
  return found
}

export type SeededBatch = {
  batchId: string
  version: SeedVersion
  waitingPieceIds: string[]
  plan: DemoBatch
}

/** One batch: made, and its fired pieces played a few a day over the hearths. */
export async function seedBatch(plan: DemoBatch, cast: BatchCast, today: Date): Promise<SeededBatch> {
  const firstDay = nextWorkday(new Date(today.getTime() - plan.daysAgo * dayMs))
  await cast.recipes.advanceTo(firstDay)
  setClock(() => firstDay.getTime())
  const version = versionAt(cast.recipes.versions, plan.recipe, firstDay)
  const batch = await createBatch(cast.masterCooper, {
    customerId: cast.customerIds[plan.customer] ?? '',
    recipeVersionId: version.versionId,
    pieceCount: plan.count,
    woodLot: plan.woodLot,
    dueWeek: null,
    notes: 'Demo batch, invented.',
  })
  const pieces = await listPieces(seed, { batchId: batch.id, show: 'waiting', limit: 200 })
  const perDay = Math.min(3, cast.room.hearths.length)
  let day = firstDay
  for (const [index, piece] of pieces.items.slice(0, plan.fired).entries()) {
    if (index > 0 && index % perDay === 0) day = nextWorkday(new Date(day.getTime() + dayMs))
    const hearth = cast.room.hearths[(index + Math.floor(index / perDay)) % cast.room.hearths.length]
    if (hearth === undefined) throw new Error('The room has no hearths.')
    await seedFiring({ plan, cast, version, hearth, pieceId: piece.id, index, day, slot: index % perDay })
  }
  return {
    batchId: batch.id,
    version,
    waitingPieceIds: pieces.items.slice(plan.fired).map((piece) => piece.id),
    plan,
  }
}

type OneFiring = {
  plan: DemoBatch
  cast: BatchCast
  version: SeedVersion
  hearth: SeedHearth
  pieceId: string
  index: number
  day: Date
  slot: number
}

const colours = ['pale honey', 'honey brown', 'chestnut', 'dark chestnut']
const smells = ['bread', 'toasted bread', 'vanilla', 'caramel', 'smoke']

async function seedFiring({
  plan,
  cast,
  version,
  hearth,
  pieceId,
  index,
  day,
  slot,
}: OneFiring): Promise<void> {
  const random = cast.random.fork(`${plan.daysAgo} ${index}`)
  const trouble = plan.trouble?.find((one) => one.at === index)
  const toaster = cast.toasters[index % cast.toasters.length]
  if (toaster === undefined) throw new Error('The demo has no toasters.')
  const startAt = new Date(day.getTime() + slot * 1_500_000 + Math.round(random.next() * 240) * 1000)
  const { firing, endAt } = await playFiring({
    pieceId,
    hearthId: hearth.id,
    toaster,
    startAt,
    content: version.content,
    gateway: hearth.gateway,
    probeIds: hearth.probeIds,
    engine: {
      seed: plan.daysAgo * 100 + index,
      skill: Math.min(
        0.95,
        Math.max(0.2, 0.62 + random.gaussian() * 0.18 - (index % cast.toasters.length) * 0.06),
      ),
      moisturePercent: Math.round((plan.moisturePercent + random.gaussian() * 0.7) * 10) / 10,
      ...trouble?.engine,
    },
    ...(trouble?.gap === undefined ? {} : { gap: trouble.gap }),
    ...(trouble?.abandonReason === undefined
      ? {}
      : {
          abandonReason: trouble.abandonReason,
          stopAtToastS: 0.4 * (plannedFiringS(version.content) - 1800),
        }),
    finish: {
      colour: colours[Math.floor(random.next() * colours.length)] ?? '',
      smell: smells[Math.floor(random.next() * smells.length)] ?? '',
      outsideTempC: Math.round(random.between(52, 74)),
      remarks: '',
    },
  })
  setClock(() => endAt.getTime() + 60_000)
  await sealFiring(firing.id)
  if (firing.state === 'finished') await scoreFiring(seed, { id: firing.id })
  await recordReplayedAlarms(seed, { firingId: firing.id, seenAfterS: Math.round(random.between(4, 25)) })
}
