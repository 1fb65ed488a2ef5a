import { execFileSync } from 'node:child_process'
import { closeSync, existsSync, mkdirSync, openSync, readFileSync, rmSync, writeSync } from 'node:fs'
import { join } from 'node:path'

/** The disk of a gateway's spool. */
export type SpoolDisk = {
  folder: string
  /** `tmpfs`: a real file system of 1 MiB that gets full; `injected`: the machine may not mount one. */
  kind: 'tmpfs' | 'injected'
  /** Fills it to the last byte and keeps it full; on an injected one the gateway is told to fail instead. */
  fill: () => void
  free: () => void
  remove: () => void
}

const diskBytes = 1024 * 1024
const refillMs = 40
const deviceName = 'emberstave-faults'

const mounted = new Set<string>()

/** For an end by a signal: nothing that was mounted here stays. */
export function unmountAll(): void {
  for (const place of mounted) unmount(place)
}

/** Unmounts what an earlier run left behind that was itself ended by kill -9; its folders name its process. */
export function unmountLeftovers(): void {
  for (const line of readFileSync('/proc/mounts', 'utf8').split('\n')) {
    const [device, place = ''] = line.split(' ')
    const pid = /emberstave-faults-(\d+)-/.exec(place)?.[1]
    if (device === deviceName && pid !== undefined && !existsSync(`/proc/${pid}`)) unmount(place)
  }
}

/** Mounts a small file system of its own for a spool when this process may, else makes a folder. */
export function makeSpoolDisk(place: string): SpoolDisk {
  mkdirSync(place, { recursive: true })
  const isMounted = mountSmall(place)
  const folder = join(place, 'spool')
  mkdirSync(folder, { recursive: true })
  const ballast = join(place, 'ballast')
  let timer: NodeJS.Timeout | undefined
  const free = () => {
    clearInterval(timer)
    rmSync(ballast, { force: true })
  }
  return {
    folder,
    kind: isMounted ? 'tmpfs' : 'injected',
    fill: () => {
      if (!isMounted) return
      fillUp(ballast)
      // What the spool gives up, the ballast takes.
      timer = setInterval(() => fillUp(ballast), refillMs)
    },
    free,
    remove: () => {
      free()
      if (isMounted) unmount(place)
    },
  }
}

function mountSmall(place: string): boolean {
  if (process.getuid?.() !== 0) return false
  try {
    const options = `size=${diskBytes},mode=700`
    execFileSync('mount', ['-t', 'tmpfs', '-o', options, deviceName, place], { stdio: 'ignore' })
    mounted.add(place)
    return true
  } catch {
    return false
  }
}

function unmount(place: string): void {
  mounted.delete(place)
  execFileSync('umount', ['--lazy', place], { stdio: 'ignore' })
}

function fillUp(path: string): void {
  const file = openSync(path, 'a')
  try {
    for (let size = 64 * 1024; size >= 1; size = Math.floor(size / 8)) {
      const bytes = Buffer.alloc(size)
      try {
        for (;;) if (writeSync(file, bytes) < size) break
      } catch (error) {
        const isFull = error instanceof Error && 'code' in error && error.code === 'ENOSPC'
        if (!isFull) throw error
      }
    }
  } finally {
    closeSync(file)
  }
}
