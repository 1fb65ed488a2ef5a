import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import type { Page } from 'playwright-core'
import * as z from 'zod'
import { closeOrm } from '@/lib/db/orm'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { readDemoFile } from '@/simulators/hearth/demo-file'
import { seedDemo } from '@/simulators/scenarios/demo'
import { demoPassword, demoPeople } from '@/simulators/scenarios/seed-people'
import type { Figure } from '@/tests/bench/figure'
import { printFigures, quantile } from '@/tests/bench/figure'
import { startLiveLoad, startViewers } from '@/tests/bench/live-load'
import { livePageHooks } from '@/tests/bench/live-page-hooks'
import { growthOver } from '@/tests/bench/live-page-growth'
import { signIn, startApp, startBrowser } from '@/tests/support/started-app'

/** Eight fires of three attached probes each, and as many viewers as TARGETS says. */
const fires = 8
const viewers = 50
/** How long the page is watched, s; issue-long runs set it higher. */
const watchS = Number(process.env['LIVE_PAGE_SECONDS'] ?? 40)
const taps = 12

const benchShape = z.object({
  pixels: z.array(z.tuple([z.number(), z.number()])),
  longTasksMs: z.array(z.number()),
  cls: z.number(),
  lcpMs: z.number(),
})
const readBench = async (page: Page) => benchShape.parse(await page.evaluate('globalThis.bench'))

/**
 * The fireside in a real Chromium against the built app under load: from a reading's commit to the frame that shows it,
 * from a tap to its word on the screen, long tasks, and what twelve hours of live readings leave in its memory.
 */
async function benchLivePage(): Promise<Figure[]> {
  let folder = ''
  const app = await startApp(async (dataDir) => {
    folder = dataDir
    const shape = {
      hearthCount: fires,
      liveToastMinutes: Array.from({ length: fires }, (_, i) => 2 + i),
      historyDays: 12,
    }
    await seedDemo(shape, () => {})
    await closeIngestPool()
    await closeOrm()
  })
  const browser = await startBrowser()
  const { demo } = readDemoFile(join(folder, 'demo.json'))
  const troubles: string[] = []
  const load = startLiveLoad(demo, app.origin, (words) => troubles.push(words))
  try {
    const person = { email: demoPeople.toaster.email, password: demoPassword }
    const { page } = await signIn(browser, app.origin, person, { width: 1280, height: 800 })
    await page.addInitScript(livePageHooks)
    const answer: unknown = await (await page.request.get('/api/firings?state=live')).json()
    const firingIds = z
      .object({ items: z.array(z.object({ id: z.uuid() })) })
      .parse(answer)
      .items.map(({ id }) => id)
    const cookie = (await page.context().cookies()).map(({ name, value }) => `${name}=${value}`).join('; ')
    const endViewers = await startViewers(app.origin, cookie, firingIds, viewers)
    await page.goto(`/fireside/${firingIds[0] ?? ''}`, { waitUntil: 'load' })
    await sleep(4_000)
    const before = await readBench(page)
    await sleep(watchS * 1_000)
    const after = await readBench(page)
    const tapMs = await measureTaps(page)
    endViewers()
    if (troubles.length > 0)
      process.stdout.write(`  ${troubles.length} messages were not committed: ${troubles[0]}\n`)
    const delays = after.pixels.slice(before.pixels.length).flatMap(([atMs, shownMs]) => {
      const committed = load.committedAtMs.get(atMs) ?? nearestCommit(load.committedAtMs, atMs)
      return committed === null ? [] : [Math.max(0, shownMs - committed)]
    })
    if (delays.length < watchS) throw new Error(`only ${delays.length} readings were seen on the screen`)
    const longTasksMs = after.longTasksMs.slice(before.longTasksMs.length)
    const growthMb = await growthOver(page, app.origin, firingIds[0] ?? '')
    return [
      {
        what: `reading committed → pixel, ${fires} fires, ${viewers} viewers, p95`,
        value: quantile(delays, 0.95),
        unit: 'ms',
        target: '≤ 250',
      },
      { what: 'the same, p99', value: quantile(delays, 0.99), unit: 'ms', target: '≤ 500' },
      { what: 'the same, readings seen', value: delays.length, unit: '', target: '' },
      {
        what: 'tap → acknowledged on screen, p95',
        value: quantile(tapMs, 0.95),
        unit: 'ms',
        target: '≤ 100',
      },
      {
        what: `longest task in ${watchS} s live`,
        value: Math.max(0, ...longTasksMs),
        unit: 'ms',
        target: '≤ 100',
      },
      { what: 'fireside, largest contentful paint', value: before.lcpMs, unit: 'ms', target: '≤ 1500' },
      { what: 'fireside, layout shift', value: before.cls, unit: '', target: '≤ 0.05' },
      { what: 'growth over 12 h of live readings', value: growthMb, unit: 'MB', target: '≤ 10' },
    ]
  } finally {
    await load.stop()
    await browser.close()
    await app.stop()
  }
}

/** A gateway's instants are stored by its clock's offset, a few ms off on one machine. */
function nearestCommit(committed: ReadonlyMap<number, number>, atMs: number): number | null {
  for (let off = 1; off <= 60; off += 1) {
    const found = committed.get(atMs - off) ?? committed.get(atMs + off)
    if (found !== undefined) return found
  }
  return null
}

/** From a finger's touch on "Stir" to the frame with its word, ms; each is taken back again. */
async function measureTaps(page: Page): Promise<number[]> {
  const found: number[] = []
  for (let i = 0; i < taps; i += 1) {
    const tapped = await page.evaluate(`new Promise((resolve) => {
      const button = [...document.querySelectorAll('button')].find((one) => one.textContent.startsWith('Stir'))
      const startedAt = performance.now()
      const observer = new MutationObserver(() => {
        const shown = [...document.querySelectorAll('[role=status]')].some((one) => one.textContent.includes('Stir'))
        if (!shown) return
        observer.disconnect()
        requestAnimationFrame(() => setTimeout(() => resolve(performance.now() - startedAt)))
      })
      observer.observe(document.body, { childList: true, subtree: true, characterData: true })
      button.click()
      setTimeout(() => resolve(-1), 5000)
    })`)
    const ms = z.number().parse(tapped)
    if (ms < 0) throw new Error('a tap was not acknowledged within 5 s')
    found.push(ms)
    await page.getByRole('button', { name: /^Undo/ }).click()
    await page.waitForTimeout(400)
  }
  return found
}

process.stdout.write(`\n${printFigures(await benchLivePage())}\n`)
