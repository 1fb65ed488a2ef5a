import type { PieceDto } from '@/lib/batches/schema'
import { createBatch } from '@/lib/batches/create-batch'
import { listPieces } from '@/lib/batches/list-pieces'
import { isAppError } from '@/lib/errors'
import type { FiringDto } from '@/lib/firings/schema'
import { startFiring } from '@/lib/firings/start-firing'
import { recordProbeCheck } from '@/lib/probes/record-probe-check'
import { recordWaterCheck } from '@/lib/probes/record-water-check'
import { approveVersion } from '@/lib/recipes/approve-version'
import { createRecipe } from '@/lib/recipes/create-recipe'
import type { RecipeContent } from '@/lib/recipes/schema'
import { sendForReview } from '@/lib/recipes/send-for-review'
import type { SeedHearth } from '@/simulators/scenarios/seed-room'
import { seedRoom } from '@/simulators/scenarios/seed-room'
import type { TestPeople } from '@/tests/support/people'
import { testPassword } from '@/tests/support/people'
import { sampleContent } from '@/tests/support/recipe-content'

export const dayMs = 86_400_000

/** A whole recipe that a test can play in a moment: 2 min preheat, 2 min bend, 12 min toast, 2 min rest. */
export function shortContent(changes: Partial<RecipeContent> = {}): RecipeContent {
  const [warm, climb, hold] = sampleContent().stages
  if (warm === undefined || climb === undefined || hold === undefined) throw new Error('three stages')
  const base = sampleContent()
  return {
    ...base,
    preheat: { ...base.preheat, minutes: 2 },
    bend: { ...base.bend, minimumMinutes: 2 },
    stages: [
      { ...warm, targetTempC: 130, minutes: 6, cues: [] },
      { ...climb, targetTempC: 165, minutes: 3 },
      { ...hold, targetTempC: 165, minutes: 3, cues: [] },
    ],
    limits: { woodMaximumC: 230, climbMaximumCPerMin: 60, spreadC: 20 },
    restMinutes: 2,
    ...changes,
  }
}

/** An approved version of a new recipe. */
export async function approvedVersion(
  people: TestPeople,
  name: string,
  content: RecipeContent,
): Promise<string> {
  const recipe = await createRecipe(people.chemist.actor, { name, customerId: null, content })
  const id = recipe.latestVersion.id
  await sendForReview(people.chemist.actor, { id })
  await approveVersion(people.masterCooper.actor, { id, password: testPassword, meaning: 'I approve this.' })
  return id
}

/** A batch of a version for the first customer (or the second), with its pieces in order. */
export async function batchOf(
  people: TestPeople,
  recipeVersionId: string,
  pieceCount: number,
  customerId = people.customers.first.id,
): Promise<PieceDto[]> {
  const batch = await createBatch(people.masterCooper.actor, {
    customerId,
    recipeVersionId,
    pieceCount,
    woodLot: 'Test lot 1',
    dueWeek: null,
    notes: '',
  })
  const { items } = await listPieces(people.masterCooper.actor, {
    batchId: batch.id,
    show: 'all',
    limit: 200,
  })
  return items.sort((a, b) => a.position - b.position)
}

/** Hearths whose gateways may replay, with every wood probe and the water checked ten days ago and in date. */
export async function checkedRoom(people: TestPeople, hearthCount: number): Promise<SeedHearth[]> {
  const room = await seedRoom(people.administrator.actor, hearthCount)
  const checkedAt = new Date(Date.now() - 10 * dayMs).toISOString()
  const dueAt = new Date(Date.now() + 100 * dayMs).toISOString()
  for (const { probeIds } of room.hearths) {
    for (const probeId of [probeIds.lead, probeIds.opposite]) {
      for (const referenceTempC of [0, 205]) {
        await recordProbeCheck(people.masterCooper.actor, {
          probeId,
          kind: referenceTempC === 0 ? 'ice' : 'block',
          referenceTempC,
          measuredTempC: referenceTempC + 0.4,
          uncertaintyC: 0.4,
          checkedAt,
          dueAt,
        })
      }
    }
  }
  await recordWaterCheck(people.masterCooper.actor, {
    source: 'Mains',
    tcaNgPerL: 0.4,
    freeChlorineMgPerL: 0,
    checkedAt,
    dueAt,
  })
  return room.hearths
}

/** Starts a piece on a hearth as a toaster would. */
export async function startOn(
  people: TestPeople,
  pieceId: string,
  hearthId: string,
  changes: Partial<Parameters<typeof startFiring>[1]> = {},
): Promise<FiringDto> {
  return startFiring(people.toaster.actor, {
    pieceId,
    hearthId,
    moisturePercent: 20,
    moistureMethod: 'meter',
    isTrial: false,
    isStartListDone: true,
    ...changes,
  })
}

export type Refusal = { kind: string; detail: string; fields: Readonly<Record<string, string>> }

/** What a verb refused with. @throws Error when it went through, or failed in another way */
export async function refusalOf(work: Promise<unknown>): Promise<Refusal> {
  try {
    await work
  } catch (error) {
    if (isAppError(error)) return { kind: error.kind, detail: error.detail, fields: error.fields }
    throw error
  }
  throw new Error('It was not refused.')
}
