import net from 'node:net'
import { changeKept, readKept } from './kept.mjs'
import { cloneHash } from './paths.mjs'
import { SetupError } from './say.mjs'

/** Null when nobody listens on the port, on any of the machine's addresses; else the error's code. */
export function portTrouble(port, host) {
  return new Promise((resolve) => {
    const server = net.createServer()
    server.on('error', (error) => resolve(error.code ?? 'EADDRINUSE'))
    server.listen({ port, host, exclusive: true }, () => server.close(() => resolve(null)))
  })
}

// Below 32768, where Linux begins to lend ports to outgoing connections; the clone's own hash sets where the
// search begins, so that two clones seldom want the same one.
const FIRST = 20_000
const COUNT = 12_000

async function findFreePort(taken) {
  const start = parseInt(cloneHash.slice(0, 6), 16) % COUNT
  for (let step = 0; step < 500; step += 1) {
    const port = FIRST + ((start + step) % COUNT)
    if (!taken.includes(port) && (await portTrouble(port)) === null) return port
  }
  throw new SetupError(
    'No free port was found between 20000 and 32000.',
    'Stop some servers, then run this again.',
  )
}

/** The port of last time for a purpose, whether or not it is in use now; 0 before the first. */
export function lastPort(purpose) {
  return readKept('ports.json', {})[purpose] ?? 0
}

/**
 * The port that this clone uses for a purpose: the one of last time while it is free, else a new free one,
 * remembered in `.data/ports.json`.
 *
 * @param {string} purpose
 * @param {{ avoid?: number[] }} [options] ports that have just been found unusable
 * @returns {Promise<number>}
 */
export async function keptPort(purpose, { avoid = [] } = {}) {
  const ports = await changeKept('ports.json', {}, async (known) => {
    const last = known[purpose]
    if (last && !avoid.includes(last) && (await portTrouble(last)) === null) return known
    return { ...known, [purpose]: await findFreePort([...Object.values(known), ...avoid]) }
  })
  return ports[purpose]
}

/** The application's port: `PORT`, else 3000. */
export function wantedPort() {
  const wanted = process.env.PORT?.trim() || '3000'
  const port = Number(wanted)
  if (!/^\d+$/.test(wanted) || port < 1 || port > 65535) {
    throw new SetupError(
      `PORT is “${wanted}”, which is not a port.`,
      'Give a whole number from 1 to 65535, for example PORT=3001.',
    )
  }
  return port
}

/** The same, refused with what to do when it cannot be had. */
export async function serverPort(command) {
  const port = wantedPort()
  const trouble = await portTrouble(port)
  const other = port < 65535 ? port + 1 : 3001
  if (trouble === 'EACCES') {
    throw new SetupError(
      `Port ${port} may be opened by root only.`,
      `Choose one above 1023: PORT=3000 ${command}`,
    )
  }
  if (trouble) {
    throw new SetupError(
      `Port ${port} is used by another program.`,
      `Stop that program (ss -ltnp 'sport = :${port}' names it), or choose another port: PORT=${other} ${command}`,
    )
  }
  return port
}
