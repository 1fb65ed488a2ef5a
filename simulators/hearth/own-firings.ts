import { mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs'
import { dirname } from 'node:path'
import * as z from 'zod'

/*
 * Which firings are the simulator's own to mark and finish, and which hearths it keeps alive. A firing that a person
 * started gets its readings and nothing else. Kept on disk, so that a restart knows its own again.
 */

const storeSchema = z.object({ firingIds: z.array(z.string()), hearths: z.array(z.int()) })

export type OwnFirings = {
  /** Started by the simulator, or in progress when the demo was seeded. */
  isOwn: (firing: { id: string; preheatAt: string | null }) => boolean
  addFiring: (firingId: string, hearth: number) => void
  keptHearths: () => readonly number[]
}

export function openOwnFirings(path: string, seededAtMs: number): OwnFirings {
  let store = readStore(path)
  const save = (next: typeof store) => {
    store = next
    mkdirSync(dirname(path), { recursive: true })
    writeFileSync(`${path}.new`, JSON.stringify(store))
    renameSync(`${path}.new`, path)
  }
  return {
    isOwn: ({ id, preheatAt }) =>
      store.firingIds.includes(id) || (preheatAt !== null && Date.parse(preheatAt) < seededAtMs),
    addFiring: (firingId, hearth) => {
      if (store.firingIds.includes(firingId) && store.hearths.includes(hearth)) return
      save({
        firingIds: [...store.firingIds.filter((id) => id !== firingId), firingId].slice(-200),
        hearths: [...new Set([...store.hearths, hearth])].sort((a, b) => a - b),
      })
    },
    keptHearths: () => store.hearths,
  }
}

function readStore(path: string): z.infer<typeof storeSchema> {
  try {
    return storeSchema.parse(JSON.parse(readFileSync(path, 'utf8')))
  } catch {
    // Absent at the first start; damaged, the worst that happens is that a firing of ours is left to people.
    return { firingIds: [], hearths: [] }
  }
}
