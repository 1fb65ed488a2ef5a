import type { PointFeed } from './point-feed'

/** How far a feed was taken: its length, version and last instant then. */
export type Taken = { length: number; version: number; lastAtMs: number }
export const nothingTaken: Taken = { length: 0, version: 0, lastAtMs: -Infinity }

/**
 * Where to take a feed from: behind what was taken when it only grew at its end, from its start when something came
 * late and stands in between, null when nothing changed.
 */
export function takeFrom(feed: Pick<PointFeed, 'length' | 'version' | 'atMs'>, taken: Taken): number | null {
  if (feed.version === taken.version) return null
  const grownBy = feed.length - taken.length
  const isAppended =
    grownBy === feed.version - taken.version &&
    (taken.length === 0 || feed.atMs()[taken.length - 1] === taken.lastAtMs)
  return isAppended ? taken.length : 0
}

export function takenAll(feed: Pick<PointFeed, 'length' | 'version' | 'atMs'>): Taken {
  return {
    length: feed.length,
    version: feed.version,
    lastAtMs: feed.length === 0 ? -Infinity : (feed.atMs()[feed.length - 1] ?? -Infinity),
  }
}
