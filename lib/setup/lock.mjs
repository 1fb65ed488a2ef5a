import net from 'node:net'
import { setTimeout as sleep } from 'node:timers/promises'
import { cloneHash } from './paths.mjs'
import { SetupError } from './say.mjs'

// A lock is a listening socket in Linux's abstract name space: taking it is atomic, and the kernel gives it
// back when its process dies in whatever way, so that there is no stale lock file to clear by hand.
const address = (name, scope) => `\0emberstave/${scope}/${name}`

function tryLock(name, scope, what) {
  return new Promise((resolve, reject) => {
    const server = net.createServer((socket) => {
      socket.on('error', () => {})
      socket.end(JSON.stringify({ what, pid: process.pid }))
    })
    server.on('error', (error) => (error.code === 'EADDRINUSE' ? resolve(null) : reject(error)))
    server.listen(address(name, scope), () => {
      server.unref()
      resolve(() => new Promise((done) => server.close(() => done())))
    })
  })
}

/**
 * Who holds a lock of this clone, or null.
 *
 * @returns {Promise<{ what: string, pid: number } | null>}
 */
export function lockHolder(name, scope = cloneHash) {
  return new Promise((resolve) => {
    const socket = net.connect(address(name, scope))
    let text = ''
    socket.setEncoding('utf8').setTimeout(1000, () => socket.destroy())
    socket.on('data', (part) => (text += part))
    socket.on('error', () => {})
    socket.on('close', (failed) => {
      if (text) return resolve(JSON.parse(text))
      // Refused or absent: free. Connected but silent: held by a process too busy to answer.
      resolve(failed ? null : { what: 'another command', pid: 0 })
    })
  })
}

/**
 * Takes a lock or says who has it.
 *
 * @returns {Promise<() => Promise<void>>} gives it back; the process's end does so too
 */
export async function holdLock(name, what) {
  const release = await tryLock(name, cloneHash, what)
  if (release) return release
  const holder = await lockHolder(name)
  const who = holder?.pid ? `${holder.what} (process ${holder.pid})` : 'another command'
  throw new SetupError(
    `${what} cannot run now: ${who} is running in this clone.`,
    'Wait for it or stop it with Ctrl-C, then run this again. A second clone can run at the same time.',
  )
}

/** Runs `body` alone, waiting for whoever is in it. `scope` 'machine' holds for every clone. */
export async function withLock(name, body, { scope = cloneHash, timeoutS = 900 } = {}) {
  const until = Date.now() + timeoutS * 1000
  for (;;) {
    const release = await tryLock(name, scope, name)
    if (release) {
      try {
        return await body()
      } finally {
        await release()
      }
    }
    if (Date.now() > until) {
      const holder = await lockHolder(name, scope)
      throw new SetupError(
        `Waited ${timeoutS} s for another run to finish its step “${name}” (process ${holder?.pid ?? 'unknown'}).`,
        'Stop that process, then run this again.',
      )
    }
    await sleep(100)
  }
}
