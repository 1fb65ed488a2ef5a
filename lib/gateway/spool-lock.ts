import { createHash } from 'node:crypto'
import { mkdirSync, realpathSync } from 'node:fs'
import { createServer } from 'node:net'
import { GatewayError } from './gateway-error'

/**
 * Keeps a second gateway program off this spool folder: two would send and remove each other's readings. The lock is
 * a listening socket in Linux's abstract name space, which the kernel gives back however the process ends, so that no
 * stale file stays behind a loss of power. Elsewhere there is no lock.
 * @throws GatewayError when another program has the folder, or it cannot be made
 */
export async function lockSpoolFolder(folder: string): Promise<() => void> {
  try {
    mkdirSync(folder, { recursive: true })
  } catch (error) {
    const reason = error instanceof Error ? error.message : String(error)
    throw new GatewayError(`The spool folder cannot be made (spool.folder: ${reason})`)
  }
  if (process.platform !== 'linux') return () => {}
  const scope = createHash('sha256').update(realpathSync(folder)).digest('hex').slice(0, 32)
  const server = createServer((socket) => socket.destroy())
  await new Promise<void>((resolve, reject) => {
    server.once('error', (error) => {
      const isTaken = 'code' in error && error.code === 'EADDRINUSE'
      reject(
        isTaken
          ? new GatewayError(`Another gateway program is using the spool folder ${folder} (spool.folder).`)
          : error,
      )
    })
    server.listen(`\0emberstave-gateway/${scope}`, resolve)
  })
  server.unref()
  return () => void server.close()
}
