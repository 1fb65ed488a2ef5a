import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { createContext, runInContext } from 'node:vm'
import { describe, expect, test } from 'vitest'

/** The service worker as the browser runs it, over a network and caches that the test holds. */

const origin = 'https://toast.example'
const source = readFileSync(join(process.cwd(), 'lib', 'devices', 'service-worker.js'), 'utf8')
const shellHtml = `<link rel="stylesheet" href="/_next/static/chunks/a.css"><script src="/_next/static/chunks/b.js"></script>
  <script>self.__next_f.push([1,"static \\"/_next/static/chunks/c.js\\""])</script>`

type Handler = (event: object) => void

function start(version: string, stored = new Map<string, Map<string, Response>>()) {
  const handlers = new Map<string, Handler>()
  const asked: string[] = []
  const network: { answer: (path: string) => Promise<Response> } = { answer: async (path) => files(path) }
  let hasTakenOver = false
  const keyOf = (request: unknown) =>
    new URL(
      typeof request === 'string' ? request : String(Reflect.get(Object(request), 'url') ?? request),
      origin,
    ).pathname
  const open = async (name: string) => {
    const cache = stored.get(name) ?? new Map<string, Response>()
    stored.set(name, cache)
    return {
      put: async (request: unknown, response: Response) => void cache.set(keyOf(request), response),
    }
  }
  const context = createContext({
    self: {
      addEventListener: (name: string, handler: Handler) => handlers.set(name, handler),
      location: { origin },
      skipWaiting: () => (hasTakenOver = true),
      clients: { claim: async () => {} },
    },
    caches: {
      open,
      match: async (request: unknown) => {
        for (const cache of stored.values()) {
          const found = cache.get(keyOf(request))
          if (found !== undefined) return found.clone()
        }
        return undefined
      },
      keys: async () => [...stored.keys()],
      delete: async (name: string) => stored.delete(name),
    },
    fetch: async (request: unknown) => {
      asked.push(keyOf(request))
      return network.answer(keyOf(request))
    },
    Response,
    URL,
    setTimeout: (done: () => void, ms: number) => setTimeout(done, ms / 100),
  })
  runInContext(source.replace('__VERSION__', version), context)

  const wait = async (name: string) => {
    let work: Promise<unknown> = Promise.resolve()
    handlers.get(name)?.({ waitUntil: (promise: Promise<unknown>) => (work = promise) })
    await work
  }
  /** What the worker answers; null when it leaves the request to the browser. */
  const load = async (path: string, more: { mode?: string; method?: string } = {}) => {
    const answers: Promise<Response>[] = []
    handlers.get('fetch')?.({
      request: {
        method: more.method ?? 'GET',
        mode: more.mode ?? 'navigate',
        url: new URL(path, origin).toString(),
      },
      respondWith: (promise: Promise<Response>) => void answers.push(promise),
    })
    return answers[0] === undefined ? null : await answers[0]
  }
  return {
    stored,
    asked,
    network,
    install: () => wait('install'),
    activate: () => wait('activate'),
    load,
    say: (data: unknown) => handlers.get('message')?.({ data }),
    hasTakenOver: () => hasTakenOver,
  }
}

function files(path: string): Response {
  if (path === '/offline') return new Response(shellHtml, { headers: { 'content-type': 'text/html' } })
  if (path.endsWith('.css')) return new Response('@font-face{src:url(../media/next.woff2)}')
  if (path.startsWith('/_next/static/')) return new Response(`file ${path}`)
  return new Response(`page ${path}`)
}

const down = async (): Promise<Response> => {
  throw new TypeError('Failed to fetch')
}

describe('the service worker', () => {
  test('keeps the shell with the scripts, styles and fonts that it names, and nothing else', async () => {
    const worker = start('one')
    await worker.install()
    expect([...(worker.stored.get('emberstave-one')?.keys() ?? [])].sort()).toEqual([
      '/_next/static/chunks/a.css',
      '/_next/static/chunks/b.js',
      '/_next/static/chunks/c.js',
      '/_next/static/media/next.woff2',
      '/offline',
    ])
  })

  test('shows a page of the room from the server, and the shell when the network is down', async () => {
    const worker = start('one')
    await worker.install()
    expect(await (await worker.load('/fireside/7b0c'))?.text()).toBe('page /fireside/7b0c')
    worker.network.answer = down
    for (const path of ['/room', '/room/start', '/fireside/7b0c', '/who', '/']) {
      expect(await (await worker.load(path))?.text(), path).toBe(shellHtml)
    }
  })

  test('takes a server for gone that what stands before it calls gone, or that does not answer in time', async () => {
    const worker = start('one')
    await worker.install()
    worker.network.answer = async () => new Response('bad gateway', { status: 502 })
    expect(await (await worker.load('/room'))?.text()).toBe(shellHtml)
    worker.network.answer = () => new Promise(() => {})
    expect(await (await worker.load('/room'))?.text()).toBe(shellHtml)
    // Another error is the server's own word.
    worker.network.answer = async () => new Response('not yours', { status: 404 })
    expect((await worker.load('/fireside/7b0c'))?.status).toBe(404)
  })

  test('never touches the API, pages with data of the desk, writes, or another origin', async () => {
    const worker = start('one')
    await worker.install()
    const before = [...worker.stored.values()].map((cache) => cache.size)
    expect(await worker.load('/api/firings', { mode: 'cors' })).toBeNull()
    expect(await worker.load('/api/session', { method: 'POST', mode: 'cors' })).toBeNull()
    expect(await worker.load('/firings/7b0c')).toBeNull()
    expect(await worker.load('/room', { mode: 'cors' })).toBeNull()
    expect(await worker.load('https://elsewhere.example/_next/static/x.js', { mode: 'cors' })).toBeNull()
    await worker.load('/fireside/7b0c')
    expect([...worker.stored.values()].map((cache) => cache.size)).toEqual(before)
  })

  test('a file of a build is asked for once', async () => {
    const worker = start('one')
    await worker.install()
    const [kept, later] = ['/_next/static/chunks/b.js', '/_next/static/chunks/z.js']
    const asked = worker.asked.length
    for (const path of [kept, later, later]) {
      expect(await (await worker.load(path, { mode: 'no-cors' }))?.text()).toBe(`file ${path}`)
    }
    expect(worker.asked.slice(asked)).toEqual([later])
  })

  test('a new version waits until a person says so, and then drops what the older one kept', async () => {
    const old = start('one')
    await old.install()
    const next = start('two', old.stored)
    await next.install()
    expect(next.hasTakenOver()).toBe(false)
    next.say('something else')
    expect(next.hasTakenOver()).toBe(false)
    expect([...next.stored.keys()].sort()).toEqual(['emberstave-one', 'emberstave-two'])
    next.say('take over')
    expect(next.hasTakenOver()).toBe(true)
    await next.activate()
    expect([...next.stored.keys()]).toEqual(['emberstave-two'])
  })

  test('does not install without the whole shell', async () => {
    const worker = start('one')
    worker.network.answer = async (path) =>
      path.endsWith('c.js') ? new Response('gone', { status: 404 }) : files(path)
    await expect(worker.install()).rejects.toThrow(/could not be fetched/)
    expect(worker.stored.get('emberstave-one')?.has('/offline')).toBe(false)
  })
})
