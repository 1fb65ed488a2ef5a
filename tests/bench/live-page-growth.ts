import type { CDPSession, Page } from 'playwright-core'
import * as z from 'zod'

const hours = 12
const hz = 5
/** Readings of three roles in one message, a message a tick; so many messages are put in at once. */
const ticks = hours * 3_600 * hz
const ticksAtOnce = 100

const heapSchema = z.object({ usedSize: z.number() })

async function heapBytes(session: CDPSession): Promise<number> {
  await session.send('HeapProfiler.collectGarbage')
  return heapSchema.parse(await session.send('Runtime.getHeapUsage')).usedSize
}

/**
 * Twelve hours of live readings of one firing, put through the page's own socket faster than life; answers by how much
 * the page's heap has grown after a collection, MB. The server's own readings of the firing are held back meanwhile.
 */
export async function growthOver(page: Page, origin: string, firingId: string): Promise<number> {
  let inject: ((text: string) => void) | null = null
  let epoch = ''
  let index = -1
  let atMs = Date.now()
  await page.routeWebSocket(/socket\.io/, (socket) => {
    const server = socket.connectToServer()
    server.onMessage((message) => {
      const text = typeof message === 'string' ? message : ''
      if (text.includes('"firing:readings"') || text.includes('"firing:state"')) return
      const joined = /"epoch":"([^"]+)","isFresh"/.exec(text)
      if (joined !== null) {
        epoch = joined[1] ?? ''
        for (const [, found, when] of text.matchAll(/\[(\d+),"(?:lead|opposite|coals)",(\d+),/g)) {
          index = Math.max(index, Number(found))
          atMs = Math.max(atMs, Number(when))
        }
        inject = (injected) => socket.send(injected)
      }
      socket.send(message)
    })
    socket.onMessage((message) => server.send(message))
  })
  await page.goto(`${origin}/fireside/${firingId}`, { waitUntil: 'load' })
  await page.waitForTimeout(4_000)
  const session = await page.context().newCDPSession(page)
  const put = async (count: number) => {
    if (inject === null) throw new Error('the page has not joined the firing')
    for (let done = 0; done < count; done += ticksAtOnce) {
      const points: [number, string, number, number][] = []
      for (let tick = 0; tick < ticksAtOnce; tick += 1) {
        atMs += 1_000 / hz
        for (const role of ['lead', 'opposite', 'coals']) {
          index += 1
          points.push([index, role, atMs, 150 + 20 * Math.sin(index / 9_000)])
        }
      }
      inject(`42/live,${JSON.stringify(['firing:readings', { firingId, epoch, points }])}`)
      if ((done / ticksAtOnce) % 10 === 9) await page.waitForTimeout(30)
    }
    await page.waitForTimeout(1_500)
  }
  // A first quarter of an hour, so that what is made once is made.
  await put(900 * hz)
  const before = await heapBytes(session)
  await put(ticks - 900 * hz)
  return ((await heapBytes(session)) - before) / 1_048_576
}
