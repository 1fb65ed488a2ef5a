import { gzipSync } from 'node:zlib'
import type { Page, Response } from 'playwright-core'
import * as z from 'zod'
import { closeOrm } from '@/lib/db/orm'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { seedDemo } from '@/simulators/scenarios/demo'
import { demoPassword, demoPeople } from '@/simulators/scenarios/seed-people'
import type { Figure } from '@/tests/bench/figure'
import { printFigures } from '@/tests/bench/figure'
import { signIn, startApp, startBrowser } from '@/tests/support/started-app'

const kilobyte = 1024

/** Scripts that a page loads, gzipped here so that every page is counted alike; KB. */
async function scriptsKb(page: Page, path: string): Promise<number> {
  const bodies = new Map<string, Promise<Buffer>>()
  const listen = (response: Response) => {
    if (response.request().resourceType() !== 'script' || response.status() !== 200) return
    bodies.set(response.url(), response.body())
  }
  page.on('response', listen)
  await page.goto(path, { waitUntil: 'load' })
  await page.waitForTimeout(2_500)
  page.off('response', listen)
  const sizes = await Promise.all([...bodies.values()].map(async (body) => gzipSync(await body).byteLength))
  return sizes.reduce((sum, size) => sum + size, 0) / kilobyte
}

const list = z.object({ items: z.array(z.object({ id: z.uuid() })) })

async function firstId(page: Page, path: string): Promise<string> {
  const id = list.parse(await (await page.request.get(path)).json()).items[0]?.id
  if (id === undefined) throw new Error(`${path} is empty`)
  return id
}

/** JavaScript of each page beyond a bare page of this Next (the not-found page), gzip KB, in a real Chromium. */
async function benchPageWeight(): Promise<Figure[]> {
  const shape = { hearthCount: 2, liveToastMinutes: [3], historyDays: 10 }
  const app = await startApp(async () => {
    await seedDemo(shape, () => {})
    await closeIngestPool()
    await closeOrm()
  })
  const browser = await startBrowser()
  try {
    const person = { email: demoPeople.masterCooper.email, password: demoPassword }
    const { page } = await signIn(browser, app.origin, person, { width: 1440, height: 900 })
    const live = await firstId(page, '/api/firings?state=live')
    const finished = await firstId(page, '/api/firings?state=finished')
    const bareKb = await scriptsKb(page, '/no-such-page')
    const pages: [string, string, number][] = [
      ['fireside', `/fireside/${live}`, 110],
      ['room', '/room', 60],
      ['firings', '/firings', 60],
      ['firing', `/firings/${finished}`, 60],
      ['recipes', '/recipes', 60],
      ['batches', '/batches', 60],
      ['probes', '/probes', 60],
      ['account', '/account', 60],
    ]
    const figures: Figure[] = [{ what: 'bare page, JavaScript', value: bareKb, unit: 'KB gzip', target: '' }]
    for (const [name, path, target] of pages) {
      const value = Math.max(0, (await scriptsKb(page, path)) - bareKb)
      figures.push({ what: `${name} beyond a bare page`, value, unit: 'KB gzip', target: `≤ ${target}` })
    }
    return figures
  } finally {
    await browser.close()
    await app.stop()
  }
}

process.stdout.write(`\n${printFigures(await benchPageWeight())}\n`)
