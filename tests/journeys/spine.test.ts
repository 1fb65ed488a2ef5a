import { randomUUID } from 'node:crypto'
import { setTimeout as sleep } from 'node:timers/promises'
import type { Browser, Locator, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import * as z from 'zod'
import { systemActor } from '@/lib/auth/actor'
import { closeOrm } from '@/lib/db/orm'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { recipeVersionSchema } from '@/lib/recipes/schema'
import { createSite } from '@/lib/site/create-site'
import { createHearth } from '@/simulators/hearth/hearth'
import type { HearthReading } from '@/simulators/hearth/hearth'
import { hearthRecipeOf } from '@/simulators/hearth/recipe-of-content'
import { createRandom } from '@/simulators/hearth/random'
import { toMark } from '@/simulators/scenarios/play-firing'
import { demoPassword, demoPeople, seedCustomers, seedPerson } from '@/simulators/scenarios/seed-people'
import type { SeedRoom } from '@/simulators/scenarios/seed-room'
import { seedProbeChecks, seedRoom, seedWaterCheck } from '@/simulators/scenarios/seed-room'
import { signIn, startApp, startBrowser } from '@/tests/support/started-app'
import type { StartedApp } from '@/tests/support/started-app'

/*
 * The whole path once, in a real browser against the built app: a chemist writes, a master cooper approves and makes
 * a batch, a toaster fires a barrel (played fast by a gateway that may replay), the score appears, and everybody sees
 * what they may.
 */

const desk = { width: 1440, height: 900 }
const tablet = { width: 1280, height: 800 }
const phone = { width: 390, height: 844 }
const person = (one: { email: string }) => ({ email: one.email, password: demoPassword })

let app: StartedApp
let browser: Browser
let room: SeedRoom
const faultsOfEach: string[][] = []

beforeAll(async () => {
  app = await startApp(async () => {
    await createSite(systemActor('test'), {
      name: 'Journey Cooperage',
      serialPrefix: 'JRN',
      timeZone: 'Europe/London',
      isDemo: true,
    })
    const customerIds = await seedCustomers()
    const administrator = await seedPerson(demoPeople.administrator, customerIds)
    for (const one of [
      demoPeople.masterCooper,
      demoPeople.chemist,
      demoPeople.toaster,
      demoPeople.customer,
      demoPeople.secondCustomer,
    ]) {
      await seedPerson(one, customerIds)
    }
    room = await seedRoom(administrator, 1)
    const random = createRandom(1)
    const dayAgo = new Date(Date.now() - 86_400_000)
    await seedProbeChecks(administrator, room, dayAgo, 30, random)
    await seedWaterCheck(administrator, dayAgo, 30, random)
    await closeIngestPool()
    await closeOrm()
  })
  browser = await startBrowser()
})

afterAll(async () => {
  await browser.close()
  await app.stop()
})

async function as(one: { email: string }, size: { width: number; height: number }): Promise<Page> {
  const signedIn = await signIn(browser, app.origin, person(one), size)
  faultsOfEach.push(signedIn.faults)
  return signedIn.page
}

/** Presses a button until its dialog is there: a press before the page has woken up does nothing. */
async function openDialog(page: Page, name: string): Promise<Locator> {
  const button = page.getByRole('button', { name, exact: true })
  const dialog = page.getByRole('dialog')
  await button.waitFor()
  for (let tries = 0; tries < 10 && !(await dialog.isVisible()); tries += 1) {
    await button.click()
    await dialog.waitFor({ timeout: 2_000 }).catch(() => {})
  }
  return dialog
}

/** A one-second press of the large control. */
async function press(page: Page, name: string): Promise<void> {
  const button = page.getByRole('button', { name: new RegExp(name) })
  await button.waitFor()
  const box = await button.boundingBox()
  if (box === null) throw new Error(`${name} is not on the screen`)
  await page.mouse.move(box.x + box.width / 2, box.y + box.height / 2)
  await page.mouse.down()
  await sleep(1_300)
  await page.mouse.up()
}

const idSchema = z.object({ id: z.uuid() })
const pageOfIds = z.object({ items: z.array(idSchema) })

let versionId = ''
let pieceId = ''
let firingId = ''

describe('the spine, from an empty book to a scored firing', () => {
  it('a chemist writes a recipe at the bench and sends it for review', async () => {
    const page = await as(demoPeople.chemist, desk)
    await page.goto('/recipes/new')
    await page.waitForLoadState('networkidle')
    await page.getByLabel('Name').fill('Journey medium')
    await page.getByRole('button', { name: 'Make it and open the bench' }).click()
    await page.waitForURL(/\/recipe-versions\//)
    versionId = new URL(page.url()).pathname.split('/').at(-1) ?? ''
    await page.getByText('draft', { exact: false }).first().waitFor()
    const isInReview = page.getByText('in review').first()
    for (let tries = 0; tries < 10 && !(await isInReview.isVisible()); tries += 1) {
      await page
        .getByRole('button', { name: 'Send for review' })
        .click({ timeout: 5_000 })
        .catch(() => {})
      await isInReview.waitFor({ timeout: 3_000 }).catch(() => {})
    }
    await isInReview.waitFor()
  })

  it('a master cooper approves it by signature and makes a batch', async () => {
    const page = await as(demoPeople.masterCooper, desk)
    await page.goto(`/recipe-versions/${versionId}`)
    const signature = await openDialog(page, 'Approve')
    await signature.getByLabel(/password/i).fill(demoPassword)
    await page.getByRole('button', { name: 'Sign and approve' }).click()
    await signature.waitFor({ state: 'hidden' })
    await page.getByRole('button', { name: 'Withdraw' }).waitFor()
    await page.goto('/batches')
    const dialog = await openDialog(page, 'New batch')
    await dialog.getByLabel('Customer').selectOption({ label: 'Harrow Bay Cellars (demo)' })
    await dialog.getByLabel('Recipe version').selectOption({ index: 1 })
    await dialog.getByLabel('How many').fill('2')
    await dialog.getByLabel('Wood lot').fill('Norlund 22-07')
    await dialog.getByRole('button', { name: 'Make the batch' }).click()
    await page.waitForURL(/\/batches\/[0-9a-f-]{36}/)
    expect(await page.getByText(/JRN-0001-/).count()).toBe(1)
  })

  it('a toaster fires a barrel: the curve follows, stages end by a press, and it is finished', async () => {
    const page = await as(demoPeople.toaster, tablet)
    await page.goto('/room')
    await page
      .getByText(/JRN-0001-/)
      .first()
      .waitFor()
    const queue = pageOfIds.parse(await (await page.request.get('/api/barrels?show=waiting')).json())
    pieceId = queue.items[0]?.id ?? ''
    firingId = await playUntilLastStage(page)
    await page.goto(`/fireside/${firingId}`)
    await page
      .getByText(/JRN-0001-/)
      .first()
      .waitFor()
    const live = keepReading(page)
    await page.getByText('live', { exact: false }).first().waitFor()
    await page.waitForLoadState('networkidle').catch(() => {})
    await page.getByRole('button', { name: /^Feed/ }).click()
    await press(page, 'Start rest')
    await page.getByText('Rest', { exact: false }).first().waitFor()
    await press(page, 'Finish')
    const sheet = page.getByRole('dialog')
    await sheet.waitFor()
    // The rest was short: it asks why, and goes on without an answer.
    const goOn = sheet.getByRole('button', { name: 'Finish without a reason' })
    if (await goOn.isVisible()) await goOn.click()
    await sheet.getByLabel('Colour').fill('chestnut')
    await sheet.getByRole('button', { name: 'Finish' }).click()
    await page.waitForURL(/\/firings\//)
    await sleep(1_500)
    await live.stop()
  })

  it('the score appears with its terms in words', async () => {
    const page = await as(demoPeople.masterCooper, desk)
    await page.goto(`/firings/${firingId}`)
    for (let tries = 0; tries < 40; tries += 1) {
      const answer = await page.request.get(`/api/firings/${firingId}/score`)
      if (answer.ok()) break
      await sleep(500)
    }
    await page.reload()
    await page
      .getByText(/points/)
      .first()
      .waitFor()
    expect(await page.getByText('Preheat and bend').count()).toBeGreaterThan(0)
    const csv = await page.request.get(`/api/firings/${firingId}/readings.csv`)
    expect(csv.status()).toBe(200)
    expect((await csv.text()).split('\r\n').length).toBeGreaterThan(3_000)
  })

  it('a customer sees their own barrels and nothing of another’s', async () => {
    const own = await as(demoPeople.customer, phone)
    await own.goto('/orders')
    await own
      .getByText(/Journey medium/)
      .first()
      .waitFor()
    const other = await as(demoPeople.secondCustomer, phone)
    await other.goto('/orders')
    expect(await other.getByText(/Journey medium/).count()).toBe(0)
    expect((await other.request.get(`/api/barrels/${pieceId}`)).status()).toBe(404)
    for (const path of [`/api/firings/${firingId}`, `/api/recipe-versions/${versionId}`, '/api/recipes']) {
      expect((await other.request.get(path)).status(), path).toBe(403)
    }
  })

  it('no page threw, warned or broke its content security policy', () => {
    expect(faultsOfEach.length).toBeGreaterThan(5)
    expect(faultsOfEach.flat()).toEqual([])
  })
})

/** Plays a firing up to the last seconds of its last stage, over the HTTP surface and with past instants. */
async function playUntilLastStage(page: Page): Promise<string> {
  const version = recipeVersionSchema.parse(
    await (await page.request.get(`/api/recipe-versions/${versionId}`)).json(),
  )
  const recipe = hearthRecipeOf(version.content)
  const hearth = createHearth({ seed: 4, recipe, skill: 0.9, moisturePercent: 19 })
  const readings: HearthReading[] = []
  const marks: { timeS: number; fields: ReturnType<typeof toMark> }[] = []
  const toastS = recipe.stages.reduce((sum, stage) => sum + stage.durationS, 0)
  let toastAtS = Infinity
  while (hearth.timeS() < toastAtS + toastS - 5 && hearth.phase() !== 'resting') {
    const step = hearth.advance(1)
    readings.push(...step.readings)
    for (const mark of step.marks) {
      if (mark.kind === 'phase' && mark.phase === 'toasting') toastAtS = mark.timeS
      if (mark.kind !== 'phase' || mark.phase === 'bending' || mark.phase === 'toasting') {
        marks.push({ timeS: mark.timeS, fields: toMark(mark) })
      }
    }
  }
  const zeroMs = Date.now() - hearth.timeS() * 1000
  const at = (timeS: number) => new Date(zeroMs + timeS * 1000).toISOString()
  const started = await page.request.post('/api/firings', {
    data: { pieceId, hearthId: room.hearths[0]?.id, moisturePercent: 19, isStartListDone: true, at: at(0) },
  })
  expect(started.status(), await started.text()).toBe(201)
  const { id } = idSchema.parse(await started.json())
  for (const mark of marks) {
    const answer = await page.request.post(`/api/firings/${id}/marks`, {
      data: { id: randomUUID(), at: at(mark.timeS), ...mark.fields },
    })
    expect(answer.status(), await answer.text()).toBe(201)
  }
  for (let from = 0; from < readings.length; from += 5_000) await send(readings.slice(from, from + 5_000), at)
  last = readings.slice(-3)
  return id
}

const bootId = randomUUID()
let seq = 0
let last: HearthReading[] = []

async function send(readings: readonly HearthReading[], at: (timeS: number) => string): Promise<void> {
  const gateway = room.gateways[0]
  const probeIds = room.hearths[0]?.probeIds
  if (gateway === undefined || probeIds === undefined) throw new Error('the room has no gateway')
  const answer = await fetch(`${app.origin}/api/ingest/readings`, {
    method: 'POST',
    headers: { authorization: `Bearer ${gateway.token}`, 'content-type': 'application/json' },
    body: JSON.stringify({
      bootId,
      sentAt: new Date().toISOString(),
      readings: readings.map((reading) => ({
        seq: (seq += 1),
        probeId: probeIds[reading.probe],
        at: at(reading.timeS),
        emf: reading.emf,
      })),
    }),
  })
  const body = z.object({ ackedSeq: z.number(), refused: z.array(z.unknown()) }).parse(await answer.json())
  expect(body.refused).toEqual([])
  expect(body.ackedSeq).toBe(seq)
}

/** Goes on with the last readings, five a second, as a gateway would. */
function keepReading(page: Page): { stop: () => Promise<void> } {
  let isGoing = true
  const loop = (async () => {
    while (isGoing) {
      await send(last, () => new Date().toISOString())
      await sleep(200)
    }
  })()
  page.on('close', () => (isGoing = false))
  return {
    stop: async () => {
      isGoing = false
      await loop
    },
  }
}
