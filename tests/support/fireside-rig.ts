import { randomUUID } from 'node:crypto'
import { setTimeout as sleep } from 'node:timers/promises'
import type { Page } from 'playwright-core'
import * as z from 'zod'
import { systemActor } from '@/lib/auth/actor'
import { createBatch } from '@/lib/batches/create-batch'
import { closeOrm } from '@/lib/db/orm'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { approveVersion } from '@/lib/recipes/approve-version'
import { createRecipe } from '@/lib/recipes/create-recipe'
import type { RecipeContent } from '@/lib/recipes/schema'
import { sendForReview } from '@/lib/recipes/send-for-review'
import { createSite } from '@/lib/site/create-site'
import type { HearthReading } from '@/simulators/hearth/hearth'
import { createHearth } from '@/simulators/hearth/hearth'
import { createRandom } from '@/simulators/hearth/random'
import { hearthRecipeOf } from '@/simulators/hearth/recipe-of-content'
import { toMark } from '@/simulators/scenarios/play-firing'
import { demoPassword, demoPeople, seedCustomers, seedPerson } from '@/simulators/scenarios/seed-people'
import type { SeedHearth, SeedRoom } from '@/simulators/scenarios/seed-room'
import { seedProbeChecks, seedRoom, seedWaterCheck } from '@/simulators/scenarios/seed-room'
import type { StartedApp } from '@/tests/support/started-app'
import { startApp } from '@/tests/support/started-app'

/** The built app with a room of its own: people, hearths whose gateways may replay, one recipe and a queue of it. */
export type FiresideRig = {
  app: StartedApp
  room: SeedRoom
  content: RecipeContent
  /** In the queue's order. */
  pieceIds: string[]
  /** Starts the next piece of the queue on a hearth and plays it, in the past, up to a phase and so many seconds of it. */
  playTo: (page: Page, hearthNumber: number, until: Until) => Promise<string>
  /** Lets a hearth's probes read about this temperature from now on, °C: a firing that was started by hand. */
  follow: (hearthNumber: number, tempC: number) => void
  /** Goes on with the last readings of every hearth, or as a faulty probe; five times a second. */
  keepReading: () => KeptReading
}

export type Until = { phase: 'preheating' | 'bending' | 'toasting' | 'resting'; forS: number; skill?: number }

export type KeptReading = {
  /** A hearth's lead probe says from now on that it is broken, or reads again; 'silent' sends nothing of the hearth. */
  set: (hearthNumber: number, as: 'reading' | 'open circuit' | 'silent') => void
  stop: () => Promise<void>
}

const dayMs = 86_400_000
const idSchema = z.object({ id: z.uuid() })

export async function startFiresideRig(shape: {
  hearthCount: number
  content: RecipeContent
  pieceCount: number
}): Promise<FiresideRig> {
  const seeded: { room: SeedRoom | null; pieceIds: string[] } = { room: null, pieceIds: [] }
  const app = await startApp(async () => {
    seeded.room = await seedAll(shape)
    await closeIngestPool()
    await closeOrm()
  })
  const room = seeded.room
  if (room === null) throw new Error('the room was not seeded')
  const gateways = new Map(room.gateways.map((gateway) => [gateway.id, { bootId: randomUUID(), seq: 0 }]))
  const last = new Map<number, HearthReading[]>()
  const pieceIds: string[] = []

  const send = async (hearth: SeedHearth, readings: readonly SentReading[]) => {
    const { gatewayId } = hearth.gateway.identity
    const token = room.gateways.find((gateway) => gateway.id === gatewayId)?.token
    const boot = gateways.get(gatewayId)
    if (token === undefined || boot === undefined) throw new Error('the hearth has no gateway')
    const answer = await fetch(`${app.origin}/api/ingest/readings`, {
      method: 'POST',
      headers: { authorization: `Bearer ${token}`, 'content-type': 'application/json' },
      body: JSON.stringify({
        bootId: boot.bootId,
        sentAt: new Date().toISOString(),
        readings: readings.map(({ probe, at, ...value }) => ({
          seq: (boot.seq += 1),
          probeId: hearth.probeIds[probe],
          at,
          ...value,
        })),
      }),
    })
    if (!answer.ok) throw new Error(`readings were not taken: ${answer.status} ${await answer.text()}`)
  }

  return {
    app,
    room,
    content: shape.content,
    pieceIds,
    playTo: async (page, hearthNumber, until) => {
      const hearth = hearthOf(room, hearthNumber)
      if (pieceIds.length === 0) pieceIds.push(...(await readQueue(page)))
      const pieceId = pieceIds.shift()
      if (pieceId === undefined) throw new Error('the queue is empty')
      const played = play(shape.content, until, hearthNumber)
      const zeroMs = Date.now() - played.endS * 1000
      const at = (timeS: number) => new Date(zeroMs + timeS * 1000).toISOString()
      const id = await post(page, '/api/firings', {
        pieceId,
        hearthId: hearth.id,
        moisturePercent: 20,
        moistureMethod: 'meter',
        isStartListDone: true,
        at: at(0),
      })
      for (const mark of played.marks) {
        await post(page, `/api/firings/${id}/marks`, { id: randomUUID(), at: at(mark.timeS), ...mark.fields })
      }
      const readings = played.readings.map(({ probe, timeS, emf }) => ({ probe, at: at(timeS), emf }))
      for (let from = 0; from < readings.length; from += 5_000) {
        await send(hearth, readings.slice(from, from + 5_000))
      }
      last.set(hearthNumber, played.readings.slice(-3))
      return id
    },
    follow: (hearthNumber, tempC) => {
      // Type K, near enough at these temperatures: 40 µV a degree above the terminals.
      const emf = { microvolts: 40.5 * (tempC - 24), coldJunctionC: 24 }
      last.set(
        hearthNumber,
        (['lead', 'opposite', 'coals'] as const).map((probe) => ({ probe, timeS: 0, emf })),
      )
    },
    keepReading: () => keepReading(room, last, send),
  }
}

type SentReading = { probe: HearthReading['probe']; at: string } & (
  { emf: HearthReading['emf'] } | { flag: 'open' }
)

function hearthOf(room: SeedRoom, number: number): SeedHearth {
  const hearth = room.hearths.find((one) => one.number === number)
  if (hearth === undefined) throw new Error(`there is no hearth ${number}`)
  return hearth
}

async function seedAll(shape: {
  hearthCount: number
  content: RecipeContent
  pieceCount: number
}): Promise<SeedRoom> {
  await createSite(systemActor('test'), {
    name: 'Journey Cooperage',
    serialPrefix: 'JRN',
    timeZone: 'Europe/London',
    isDemo: true,
  })
  const customerIds = await seedCustomers()
  const administrator = await seedPerson(demoPeople.administrator, customerIds)
  const masterCooper = await seedPerson(demoPeople.masterCooper, customerIds)
  const chemist = await seedPerson(demoPeople.chemist, customerIds)
  await seedPerson(demoPeople.toaster, customerIds)
  const room = await seedRoom(administrator, shape.hearthCount)
  const random = createRandom(1)
  const dayAgo = new Date(Date.now() - dayMs)
  await seedProbeChecks(administrator, room, dayAgo, 30, random)
  await seedWaterCheck(administrator, dayAgo, 30, random)
  const recipe = await createRecipe(chemist, {
    name: 'Quay medium',
    customerId: null,
    content: shape.content,
  })
  const version = { id: recipe.latestVersion.id }
  await sendForReview(chemist, version)
  await approveVersion(masterCooper, { ...version, password: demoPassword, meaning: 'I approve this.' })
  await createBatch(masterCooper, {
    customerId: customerIds[0] ?? '',
    recipeVersionId: version.id,
    pieceCount: shape.pieceCount,
    woodLot: 'Norlund 22-07',
    dueWeek: null,
    notes: '',
  })
  return room
}

async function readQueue(page: Page): Promise<string[]> {
  const answer = await page.request.get('/api/barrels?show=waiting&limit=200')
  const { items } = z.object({ items: z.array(idSchema) }).parse(await answer.json())
  return items.map((piece) => piece.id)
}

async function post(page: Page, path: string, data: object): Promise<string> {
  const answer = await page.request.post(path, { data })
  if (answer.status() !== 201) throw new Error(`${path}: ${answer.status()} ${await answer.text()}`)
  return idSchema.parse(await answer.json()).id
}

type Played = {
  readings: HearthReading[]
  marks: { timeS: number; fields: ReturnType<typeof toMark> }[]
  endS: number
}

/** The engine at one reading a second, until it has been so long in a phase. */
function play(content: RecipeContent, until: Until, seed: number): Played {
  const hearth = createHearth({
    seed,
    recipe: hearthRecipeOf(content),
    skill: until.skill ?? 0.95,
    moisturePercent: 20,
  })
  const played: Played = { readings: [], marks: [], endS: 0 }
  let enteredS = until.phase === 'preheating' ? 0 : Infinity
  while (hearth.timeS() < enteredS + until.forS) {
    const step = hearth.advance(1)
    played.readings.push(...step.readings)
    for (const mark of step.marks) {
      if (mark.kind === 'phase' && mark.phase === until.phase) enteredS = mark.timeS
      const isOwn = mark.kind !== 'phase' || (mark.phase !== 'preheating' && mark.phase !== 'finished')
      if (isOwn) played.marks.push({ timeS: mark.timeS, fields: toMark(mark) })
    }
    if (hearth.phase() === 'finished') break
  }
  played.endS = hearth.timeS()
  return played
}

function keepReading(
  room: SeedRoom,
  last: ReadonlyMap<number, HearthReading[]>,
  send: (hearth: SeedHearth, readings: readonly SentReading[]) => Promise<void>,
): KeptReading {
  const how = new Map<number, 'reading' | 'open circuit' | 'silent'>()
  let isGoing = true
  const loop = (async () => {
    for (let turn = 0; isGoing; turn += 1) {
      for (const [number, readings] of last) {
        const as = how.get(number) ?? 'reading'
        if (as === 'silent') continue
        await send(hearthOf(room, number), alive(readings, as, turn))
      }
      await sleep(200)
    }
  })()
  return {
    set: (hearthNumber, as) => how.set(hearthNumber, as),
    stop: async () => {
      isGoing = false
      await loop
    },
  }
}

/** The last readings as of now; they breathe a little, as no probe stands still over coals. */
function alive(
  readings: readonly HearthReading[],
  as: 'reading' | 'open circuit',
  turn: number,
): SentReading[] {
  const at = new Date().toISOString()
  return readings.map(({ probe, emf }) =>
    as === 'open circuit' && probe === 'lead'
      ? { probe, at, flag: 'open' }
      : { probe, at, emf: { ...emf, microvolts: emf.microvolts + 4 * Math.sin(turn / 3) } },
  )
}
