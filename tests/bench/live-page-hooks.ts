/**
 * Put into the live page before its own scripts: notes each message of readings with the instant at which the frame
 * that drew it was done. Written as text, so that nothing of the bench's bundler reaches the page.
 *
 * `pixels`: [instant of the newest reading, ms; frame done, ms]. `longTasksMs`: tasks of the main thread over 50 ms.
 */
export const livePageHooks = `
(() => {
  const bench = { pixels: [], longTasksMs: [], cls: 0, lcpMs: 0, taps: [] }
  globalThis.bench = bench
  let waiting = []
  let isScheduled = false
  const drawn = () => {
    if (waiting.length === 0 || isScheduled) return
    isScheduled = true
    const done = waiting
    waiting = []
    requestAnimationFrame(() => {
      const channel = new MessageChannel()
      channel.port1.onmessage = () => {
        const now = Date.now()
        for (const at of done) bench.pixels.push([at, now])
        isScheduled = false
      }
      channel.port2.postMessage(null)
    })
  }
  for (const name of ['stroke', 'fill', 'drawImage', 'putImageData']) {
    const original = CanvasRenderingContext2D.prototype[name]
    CanvasRenderingContext2D.prototype[name] = function (...args) {
      drawn()
      return original.apply(this, args)
    }
  }
  const Native = globalThis.WebSocket
  globalThis.WebSocket = class extends Native {
    constructor(...args) {
      super(...args)
      this.addEventListener('message', ({ data }) => {
        if (typeof data !== 'string' || !data.includes('"firing:readings"')) return
        const [, message] = JSON.parse(data.slice(data.indexOf('[')))
        const leads = message.points.filter((point) => point[1] === 'lead')
        if (leads.length > 0) waiting.push(leads[leads.length - 1][2])
      })
    }
  }
  const watch = (type, take) => new PerformanceObserver((list) => list.getEntries().forEach(take)).observe({ type, buffered: true })
  watch('longtask', (entry) => bench.longTasksMs.push(entry.duration))
  watch('largest-contentful-paint', (entry) => { bench.lcpMs = entry.startTime })
  watch('layout-shift', (entry) => { if (!entry.hadRecentInput) bench.cls += entry.value })
})()
`
