import { setTimeout as sleep } from 'node:timers/promises'
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import * as z from 'zod'
import { firingSchema } from '@/lib/firings/schema'
import type { RecipeContent } from '@/lib/recipes/schema'
import { demoPassword, demoPeople } from '@/simulators/scenarios/seed-people'
import type { FiresideRig, KeptReading } from '@/tests/support/fireside-rig'
import { startFiresideRig } from '@/tests/support/fireside-rig'
import { sampleContent } from '@/tests/support/recipe-content'
import { signIn, startBrowser } from '@/tests/support/started-app'

/*
 * One barrel from the start list to its score at a tablet, by hands alone: short steps with their reasons, a cut
 * network, a probe that breaks, a mark made late, a reload. The recipe is minutes long, so that it is played as it
 * would be: in real time.
 */

const tablet = { width: 1280, height: 800 }

/** Two minutes over the fire; preheat, pull and rest are asked longer than anybody here waits. */
function quickContent(): RecipeContent {
  const base = sampleContent()
  const [warm, , hold] = base.stages
  if (warm === undefined || hold === undefined) throw new Error('stages')
  return {
    ...base,
    preheat: { ...base.preheat, minutes: 3 },
    bend: { ...base.bend, minimumMinutes: 2 },
    planStartTempC: 150,
    stages: [
      { ...warm, name: 'Climb', targetTempC: 175, minutes: 0.5, cues: [] },
      { ...hold, targetTempC: 175, minutes: 1, lid: 'off', cues: [] },
    ],
    limits: { woodMaximumC: 230, climbMaximumCPerMin: 60, spreadC: 60 },
    restMinutes: 2,
  }
}

let rig: FiresideRig
let browser: Browser
let page: Page
let faults: string[]
let live: KeptReading
let firingId = ''

beforeAll(async () => {
  rig = await startFiresideRig({ hearthCount: 1, content: quickContent(), pieceCount: 2 })
  browser = await startBrowser()
  const person = { email: demoPeople.toaster.email, password: demoPassword }
  ;({ page, faults } = await signIn(browser, rig.app.origin, person, tablet))
  live = rig.keepReading()
}, 300_000)

afterAll(async () => {
  await live.stop()
  await browser.close()
  await rig.app.stop()
})

/** A one-second press of the large control. */
async function press(name: RegExp): Promise<void> {
  const button = page.getByRole('button', { name })
  await button.waitFor()
  const box = await button.boundingBox()
  if (box === null) throw new Error(`${name} is not on the screen`)
  await page.mouse.move(box.x + box.width / 2, box.y + box.height / 2)
  await page.mouse.down()
  await sleep(1_300)
  await page.mouse.up()
}

async function firing() {
  return firingSchema.parse(await (await page.request.get(`/api/firings/${firingId}`)).json())
}

async function untilMarked(kind: string, count: number): Promise<void> {
  await expect
    .poll(async () => (await firing()).marks.filter((mark) => mark.kind === kind).length, { timeout: 15_000 })
    .toBe(count)
}

describe('a barrel, from the start list to its score', () => {
  it('is started once every line of the list is ticked', async () => {
    await page.goto('/room')
    await page.getByRole('link', { name: 'Start preheat' }).click()
    await page.waitForURL(/\/room\/start/)
    await page.waitForLoadState('networkidle').catch(() => {})
    await page.getByLabel('Stave moisture').fill('20')
    for (const tick of await page.getByRole('checkbox').all()) await tick.check()
    await page.getByText('Follow local code and the responsible person.').first().waitFor()
    await page.getByRole('button', { name: /Start preheat/ }).click()
    await page.waitForURL(/\/fireside\//)
    firingId = new URL(page.url()).pathname.split('/').at(-1) ?? ''
    rig.follow(1, 158)
    await page.getByText('Preheat, time left').waitFor()
    expect(await firing()).toMatchObject({
      state: 'preheating',
      moisturePercent: 20,
      moistureMethod: 'meter',
    })
  })

  it('asks why the preheat and the pull were short, and takes a touch or words for it', async () => {
    await press(/Start the bend/)
    await page.getByText(/^Preheat was/).waitFor()
    // It stops nothing: the bend has begun, with its caution where the hazard is.
    await page.getByText('Stand clear of the cable and of hoops under tension.', { exact: false }).waitFor()
    await page.getByRole('button', { name: 'Staves hot already' }).click()
    await untilMarked('reason', 1)
    await press(/Pull done/)
    await page.getByText(/^The pull was/).waitFor()
    await page.getByRole('button', { name: 'Other words' }).click()
    await page.getByLabel('Or in your own words').fill('raised twice')
    await page.getByRole('button', { name: 'Keep the reason' }).click()
    await untilMarked('reason', 2)
    await press(/Start the toast/)
    await page.getByText('Climb, time left').waitFor()
  })

  it('goes on marking while the network is cut, and sends each mark once when it is back', async () => {
    await page.context().setOffline(true)
    await page.getByRole('button', { name: /^Feed/ }).click()
    await page
      .getByText(/No connection|Not live/)
      .first()
      .waitFor({ timeout: 20_000 })
    await page.getByRole('button', { name: /^Stir/ }).click()
    expect((await firing().catch(() => null))?.marks.filter((mark) => mark.kind === 'feed') ?? []).toEqual([])
    await page.context().setOffline(false)
    await untilMarked('feed', 1)
    await untilMarked('stir', 1)
    const marks = (await firing()).marks.filter((mark) => mark.kind === 'feed' || mark.kind === 'stir')
    expect(marks.map((mark) => mark.kind)).toEqual(['feed', 'stir'])
  })

  it('reads NO READING the moment its probe breaks, and the temperature again when it reads', async () => {
    await page.locator('[data-figure="wood temperature"]').waitFor({ timeout: 15_000 })
    live.set(1, 'open circuit')
    await page.locator('[data-figure="no reading"]').waitFor({ timeout: 4_000 })
    await page
      .getByText('The barrel may still be overheating: look at it.', { exact: false })
      .first()
      .waitFor()
    live.set(1, 'reading')
    await page.locator('[data-figure="wood temperature"]').waitFor({ timeout: 10_000 })
  })

  it('is there again after a reload, with everything that was done', async () => {
    const before = (await firing()).marks.length
    await page.reload()
    const startedMs = Date.now()
    await page.locator('[data-figure="wood temperature"]').waitFor({ timeout: 10_000 })
    expect(Date.now() - startedMs).toBeLessThan(10_000)
    expect((await firing()).marks.length).toBe(before)
    await page.getByRole('button', { name: /End climb|Start rest/ }).waitFor()
  })

  it('takes a mark that is made two minutes late, and says so', async () => {
    const startedMs = Date.parse((await firing()).preheatAt ?? '')
    await sleep(Math.max(0, startedMs + 123_000 - Date.now()))
    await page.getByRole('button', { name: /^Turn over/ }).click()
    await page.getByRole('button', { name: '2 min ago' }).click()
    await expect
      .poll(
        async () => {
          const mark = (await firing()).marks.find((one) => one.kind === 'turn over' && one.isInForce)
          return mark === undefined ? 0 : (Date.parse(mark.recordedAt) - Date.parse(mark.at)) / 1000
        },
        { timeout: 10_000 },
      )
      .toBeGreaterThan(115)
  })

  it('rests, asks why the rest was cut short, and is finished and scored', async () => {
    const isAtLastStage = page.getByRole('button', { name: /Start rest/ })
    if (!(await isAtLastStage.isVisible())) await press(/End climb/)
    await press(/Start rest/)
    await page.getByText('Rest, time left').waitFor()
    await page.getByText('Look for glowing joints', { exact: false }).first().waitFor()
    await press(/Finish/)
    await page.getByRole('heading', { name: /Rest was/ }).waitFor()
    await page.getByRole('dialog').getByRole('button', { name: 'Hearth needed' }).click()
    const sheet = page.getByRole('dialog')
    await sheet.getByLabel('Colour').fill('chestnut')
    await sheet.getByRole('button', { name: 'Finish', exact: true }).click()
    await page.waitForURL(/\/firings\//)
    await sleep(1_000)
    await expect
      .poll(async () => (await page.request.get(`/api/firings/${firingId}/score`)).status(), {
        timeout: 30_000,
      })
      .toBe(200)
    await page.reload()
    await page.getByRole('heading', { name: 'Left out or short' }).waitFor()
    const words = await page.locator('main').innerText()
    for (const reason of ['Staves hot already', 'raised twice', 'Hearth needed'])
      expect(words).toContain(reason)
    expect(words).toContain('the reason given: Staves hot already')
    const score = z
      .object({ firingId: z.string() })
      .parse(await (await page.request.get(`/api/firings/${firingId}/score`)).json())
    expect(score.firingId).toBe(firingId)
  })

  it('no page threw, warned or broke its content security policy', () => {
    expect(faults.filter((fault) => !/ERR_INTERNET_DISCONNECTED|WebSocket connection/.test(fault))).toEqual(
      [],
    )
  })
})
