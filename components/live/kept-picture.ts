import type { TemperatureUnit } from '@/lib/format'
import type { FiringDto } from '@/lib/firings/schema'
import type { FiringState } from '@/lib/live/events'
import type { SiteRules } from '@/lib/science/site-rules'
import type { DeviceView, PersonView } from './device-view'
import type { LiveFiringClient, StaveColumn } from './live-firing-client'
import type { MarkStorage } from './fireside-mark-sender'

/**
 * The last picture of a firing, kept in this browser so that a reload without a network still shows what was known,
 * dated. Names of people and of the customer stay out of it, but for who was signed in; it is not kept once the firing
 * is over, nor longer than a day.
 */
export type KeptPicture = {
  v: 1
  /** The server's clock when it was kept, and how far that was ahead of this browser's, ms. */
  savedAtMs: number
  offsetMs: number
  firing: FiringDto
  rules: SiteRules
  zone: string
  unit: TemperatureUnit
  canRun: boolean
  canShelve: boolean
  person: PersonView | null
  device: DeviceView | null
  state: FiringState
  columns: readonly StaveColumn[]
  curves: Record<keyof LiveFiringClient['feeds'], [atMs: number, tempC: number | null][]>
}

const prefix = 'emberstave.picture.'
const keptForMs = 24 * 3600 * 1000
/** Enough for the eye on this screen; the server has every reading. */
const POINTS_KEPT = 400

/** Every so many-th point of a curve and its last, °C to a tenth; null is no reading. */
export function thinCurve(
  atMs: ArrayLike<number>,
  tempC: ArrayLike<number>,
  most = POINTS_KEPT,
): [number, number | null][] {
  const length = atMs.length
  const step = Math.max(1, Math.ceil(length / most))
  const points: [number, number | null][] = []
  for (let i = 0; i < length; i += 1) {
    if (i % step !== 0 && i !== length - 1) continue
    const value = tempC[i] ?? Number.NaN
    points.push([atMs[i] ?? 0, Number.isNaN(value) ? null : Math.round(value * 10) / 10])
  }
  return points
}

/** The firing without the names of people. */
export function withoutNames(firing: FiringDto): FiringDto {
  return {
    ...firing,
    toaster: null,
    batch: { ...firing.batch, customerName: '' },
    marks: firing.marks.map((mark) => ({ ...mark, by: '' })),
  }
}

/** False when the browser would not keep it. */
export function keepPicture(storage: MarkStorage | null, picture: KeptPicture): boolean {
  try {
    storage?.setItem(`${prefix}${picture.firing.id}`, JSON.stringify(picture))
    return storage !== null
  } catch {
    return false
  }
}

export function forgetPicture(storage: MarkStorage | null, firingId: string): void {
  try {
    storage?.removeItem(`${prefix}${firingId}`)
  } catch {
    // There is nothing to forget where nothing is kept.
  }
}

/** The picture of a firing, or null when there is none that can be read and is of the last day. */
export function readPicture(
  storage: MarkStorage | null,
  firingId: string,
  nowMs: number = Date.now(),
): KeptPicture | null {
  try {
    const text = storage?.getItem(`${prefix}${firingId}`) ?? null
    const kept: unknown = text === null ? null : JSON.parse(text)
    return isPicture(kept) && nowMs - (kept.savedAtMs - kept.offsetMs) < keptForMs ? kept : null
  } catch {
    return null
  }
}

/** All of the last day, the newest first; the others go. */
export function readPictures(storage: Storage | null, nowMs: number = Date.now()): KeptPicture[] {
  if (storage === null) return []
  const ids = Array.from({ length: storage.length }, (_, i) => storage.key(i))
    .filter((key): key is string => key?.startsWith(prefix) === true)
    .map((key) => key.slice(prefix.length))
  return ids
    .flatMap((id) => {
      const picture = readPicture(storage, id, nowMs)
      if (picture === null) forgetPicture(storage, id)
      return picture === null ? [] : [picture]
    })
    .sort((a, b) => b.savedAtMs - a.savedAtMs)
}

/** What was written by this build or one much like it; the fields that the drawing cannot do without. */
function isPicture(value: unknown): value is KeptPicture {
  if (typeof value !== 'object' || value === null || Reflect.get(value, 'v') !== 1) return false
  const isObject = (key: string) => {
    const part: unknown = Reflect.get(value, key)
    return typeof part === 'object' && part !== null
  }
  return (
    ['savedAtMs', 'offsetMs'].every((key) => typeof Reflect.get(value, key) === 'number') &&
    ['firing', 'rules', 'state', 'columns', 'curves'].every(isObject)
  )
}
