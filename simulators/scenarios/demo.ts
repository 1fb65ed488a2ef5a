import { writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import type { PersonActor } from '@/lib/auth/actor'
import { env } from '@/lib/env'
import { retainReadings } from '@/lib/ingest/retention'
import { setClock } from '@/lib/runtime'
import { createSite } from '@/lib/site/create-site'
import { systemActor } from '@/lib/auth/actor'
import { createRandom } from '@/simulators/hearth/random'
import { demoBatches } from '@/simulators/scenarios/demo-history'
import { demoRecipes } from '@/simulators/scenarios/demo-recipes'
import { playFiring } from '@/simulators/scenarios/play-firing'
import type { SeededBatch } from '@/simulators/scenarios/seed-batches'
import { seedBatch } from '@/simulators/scenarios/seed-batches'
import type { SeedPerson } from '@/simulators/scenarios/seed-people'
import { demoPassword, demoPeople, seedCustomers, seedPerson } from '@/simulators/scenarios/seed-people'
import { seedMarkers } from '@/simulators/scenarios/seed-markers'
import { recipeHistory } from '@/simulators/scenarios/seed-recipes'
import type { SeedRoom } from '@/simulators/scenarios/seed-room'
import { endReplay, seedProbeChecks, seedRoom, seedWaterCheck } from '@/simulators/scenarios/seed-room'

const dayMs = 86_400_000

/** How the demo begins: hearths, what of the past is played, and firings in progress (minutes into the toast). */
export type DemoShape = { hearthCount: number; liveToastMinutes: readonly number[]; historyDays: number }

export const demoShape: DemoShape = { hearthCount: 4, liveToastMinutes: [26.7, 11], historyDays: 200 }
/** Six hearths at once, with a short past. */
export const busyShape: DemoShape = {
  hearthCount: 6,
  liveToastMinutes: [38, 31, 24, 17, 10, 3],
  historyDays: 30,
}

type Cast = Record<keyof typeof demoPeople, PersonActor>

/** Midnight UTC of the day that is `days` ago, plus the hour at which the room opens. */
function morning(today: Date, days: number): Date {
  return new Date(today.getTime() - days * dayMs)
}

/** The invented cooperage with its history; every step goes through the verbs that a person or a gateway uses. */
export async function seedDemo(shape: DemoShape, say: (line: string) => void): Promise<void> {
  const startedAt = new Date()
  const today = new Date(
    Date.UTC(startedAt.getUTCFullYear(), startedAt.getUTCMonth(), startedAt.getUTCDate(), 6, 40),
  )
  const random = createRandom(20_270)
  setClock(() => morning(today, 200).getTime())
  await createSite(systemActor('set-up'), {
    name: 'Saltmarsh Lane Cooperage (demo)',
    serialPrefix: 'SML',
    timeZone: 'Europe/London',
    isDemo: true,
  })
  const customerIds = await seedCustomers()
  const people = await seedCast(customerIds)
  const room = await seedRoom(people.administrator, shape.hearthCount)
  await seedChecks(people, room, today, random)
  say('people, hearths, probes and their checks are there')
  const recipes = recipeHistory(demoRecipes, people, customerIds, today)
  const toasters = [people.toaster, people.secondToaster]
  const cast = { masterCooper: people.masterCooper, toasters, customerIds, room, recipes, random }
  const batches: SeededBatch[] = []
  for (const plan of demoBatches) {
    if (plan.daysAgo > shape.historyDays) continue
    batches.push(await seedBatch(plan, cast, today))
    say(`${plan.fired} firings of ${demoRecipes[plan.recipe]?.name ?? ''} are there`)
  }
  await recipes.advanceTo(startedAt)
  say(`${demoRecipes.length} recipes with ${recipes.versions.length} versions are there`)
  await seedMarkers(people.chemist, random.fork('markers'))
  say('markers with a formula and fits are there')
  setClock(null)
  await retainReadings()
  await seedLive(shape, people, room, batches)
  await endReplay(people.administrator, room)
  await writeDemoFile(room)
}

async function seedCast(customerIds: readonly string[]): Promise<Cast> {
  const one = (person: SeedPerson) => seedPerson(person, customerIds)
  return {
    administrator: await one(demoPeople.administrator),
    masterCooper: await one(demoPeople.masterCooper),
    secondMasterCooper: await one(demoPeople.secondMasterCooper),
    chemist: await one(demoPeople.chemist),
    toaster: await one(demoPeople.toaster),
    secondToaster: await one(demoPeople.secondToaster),
    customer: await one(demoPeople.customer),
    secondCustomer: await one(demoPeople.secondCustomer),
    thirdCustomer: await one(demoPeople.thirdCustomer),
  }
}

/** Probe checks every 60 days and water checks every four weeks, so that each firing of the past was in date. */
async function seedChecks(
  people: Cast,
  room: SeedRoom,
  today: Date,
  random: ReturnType<typeof createRandom>,
): Promise<void> {
  for (let days = 199; days > 0; days -= 60) {
    setClock(() => morning(today, days).getTime())
    await seedProbeChecks(people.administrator, room, morning(today, days), 90, random)
  }
  for (let days = 199; days > 0; days -= 28) {
    setClock(() => morning(today, days).getTime())
    await seedWaterCheck(people.masterCooper, morning(today, days), 35, random)
  }
}

/** The firings in progress, up to this moment; the hearth simulator carries them on. */
async function seedLive(
  shape: DemoShape,
  people: Cast,
  room: SeedRoom,
  batches: readonly SeededBatch[],
): Promise<void> {
  const waiting = batches.flatMap((batch) => batch.waitingPieceIds.map((pieceId) => ({ pieceId, batch })))
  for (const [index, minutes] of shape.liveToastMinutes.entries()) {
    const piece = waiting[index]
    const hearth = room.hearths[index]
    if (piece === undefined || hearth === undefined) continue
    const { content } = piece.batch.version
    const beforeS = (content.preheat.minutes + content.bend.minimumMinutes + 1) * 60
    await playFiring({
      pieceId: piece.pieceId,
      hearthId: hearth.id,
      toaster: index % 2 === 0 ? people.toaster : people.secondToaster,
      startAt: new Date(Date.now() - (minutes * 60 + beforeS) * 1000),
      content,
      gateway: hearth.gateway,
      probeIds: hearth.probeIds,
      engine: { seed: 9000 + index, skill: 0.88, moisturePercent: piece.batch.plan.moisturePercent },
      stopAtToastS: minutes * 60,
    })
    setClock(null)
  }
}

/** What the simulator and the sign-in page's helpers read: sign-ins and device tokens of this demo only. */
async function writeDemoFile(room: SeedRoom): Promise<void> {
  const signIns = Object.values(demoPeople).map((person: SeedPerson) => ({
    role: person.role,
    name: person.name,
    email: person.email,
    password: demoPassword,
    // For shared tablets; most have none.
    pin: person.pin ?? null,
  }))
  const gateways = room.gateways.map((gateway) => ({
    ...gateway,
    probes: room.hearths
      .filter((hearth) => gateway.hearths.includes(hearth.number))
      .flatMap((hearth) =>
        (['lead', 'opposite', 'coals'] as const).map((role) => ({
          id: hearth.probeIds[role],
          hearth: hearth.number,
          role,
          thermocoupleType: 'K',
        })),
      ),
  }))
  const file = process.env['DEMO_FILE'] ?? join(env().DATA_DIR, 'demo.json')
  await writeFile(file, `${JSON.stringify({ signIns, gateways }, null, 2)}\n`, { mode: 0o600 })
}
