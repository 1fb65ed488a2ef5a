// The service worker of the room's pages, in plain JavaScript as the browser runs it; lib/devices/service-worker-script.ts
// writes the version in. It keeps the files of one build and one page without data (/offline), which stands in for a
// page of the room when the server does not answer. Answers of /api and pages with data never go through its caches.

const version = '__VERSION__'
const cacheName = `emberstave-${version}`
const shellPath = '/offline'
/** A server that has not answered by then is taken for gone; its answer would still be used by the next load. */
const answersWithinMs = 4000

self.addEventListener('install', (event) => event.waitUntil(keepShell()))
self.addEventListener('activate', (event) => event.waitUntil(dropOlder().then(() => self.clients.claim())))
// Only when a person has said so: an older page goes on with the files of its own build until then.
self.addEventListener('message', (event) => {
  if (event.data === 'take over') self.skipWaiting()
})
self.addEventListener('fetch', (event) => {
  const { request } = event
  const url = new URL(request.url)
  if (request.method !== 'GET' || url.origin !== self.location.origin) return
  if (isBuildFile(url.pathname)) event.respondWith(fromCache(request))
  else if (request.mode === 'navigate' && isRoomPage(url.pathname)) event.respondWith(pageOrShell(request))
})

/** Named by what they hold, so that they never change. */
function isBuildFile(path) {
  return path.startsWith('/_next/static/') || path.startsWith('/icons/')
}

function isRoomPage(path) {
  return path === '/' || path === '/who' || /^\/(room|fireside)(\/|$)/.test(path)
}

async function keepShell() {
  const cache = await caches.open(cacheName)
  const shell = await fetch(shellPath, { cache: 'reload', credentials: 'omit' })
  if (!shell.ok || shell.redirected) throw new Error('the shell could not be fetched')
  const files = buildFilesIn(await shell.clone().text())
  await Promise.all(files.map((file) => keepFile(cache, file)))
  await cache.put(shellPath, shell)
}

/** Scripts, styles and fonts that a page or a style sheet names. */
function buildFilesIn(text) {
  return [...new Set(text.match(/\/_next\/static\/[\w./~%-]+\.(?:js|css|woff2)/g) ?? [])]
}

async function keepFile(cache, file) {
  const answer = await fetch(file, { credentials: 'omit' })
  if (!answer.ok) throw new Error(`${file} could not be fetched`)
  if (file.endsWith('.css')) {
    const fonts = [...(await answer.clone().text()).matchAll(/url\((['"]?)([^'")]+\.woff2)\1\)/g)]
    for (const [, , font] of fonts) {
      const url = new URL(font, new URL(file, self.location.origin))
      const kept = await fetch(url, { credentials: 'omit' })
      if (kept.ok) await cache.put(url, kept)
    }
  }
  await cache.put(file, answer)
}

async function dropOlder() {
  const names = await caches.keys()
  const older = names.filter((name) => name.startsWith('emberstave-') && name !== cacheName)
  await Promise.all(older.map((name) => caches.delete(name)))
}

/** A file of whatever build is still kept; else from the server, and kept. */
async function fromCache(request) {
  const kept = await caches.match(request, { ignoreVary: true })
  if (kept !== undefined) return kept
  const answer = await fetch(request)
  if (answer.ok && answer.type === 'basic') {
    const cache = await caches.open(cacheName)
    await cache.put(request, answer.clone())
  }
  return answer
}

/** The page itself; the shell when the server is gone, or what stands before it says so. */
async function pageOrShell(request) {
  const answer = fetch(request).catch(() => null)
  const late = new Promise((resolve) => setTimeout(() => resolve(null), answersWithinMs))
  const page = await Promise.race([answer, late])
  if (page !== null && ![502, 503, 504].includes(page.status)) return page
  const shell = await caches.match(shellPath, { ignoreVary: true })
  if (shell !== undefined) return shell
  return (await answer) ?? Response.error()
}
