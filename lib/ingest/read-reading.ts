import type { ReadingFlag } from '@/lib/gateway/protocol'
import { readingSchema } from '@/lib/gateway/protocol'
import type { RawReading } from '@/lib/ingest/read-envelope'

/** Flags as they are stored; 0 is none. */
export const flagCodes = { open: 1, short: 2, fault: 3 } as const satisfies Record<ReadingFlag, number>

/** One reading in stored units: 0.1 µV, 0.01 °C, ms by the gateway's clock. Reused for speed: copy what you keep. */
export type ReadingCells = {
  probeId: string
  atMs: number
  emfTenthUv: number | null
  coldCentiC: number | null
  tempCentiC: number | null
  flag: number
}

/** Allowed once `readingSchema` has passed an instant of the day: the day's text and its first millisecond. */
type Day = { text: string; startMs: number }
const knownDay: Day = { text: '', startMs: 0 }

/**
 * Reads one reading into `cells`; answers null when it is right, or what is wrong with it in a sentence. The
 * verdict is exactly that of `readingSchema`: the usual shapes are told by hand, in about a microsecond, and
 * everything else is given to the schema.
 */
export function readReading(reading: RawReading, cells: ReadingCells): string | null {
  return readUsual(reading, cells) ? null : readBySchema(reading, cells)
}

function readUsual(reading: RawReading, cells: ReadingCells): boolean {
  let emf: unknown
  let tempC: unknown
  let flag = 0
  for (const key in reading) {
    const value = reading[key]
    if (key === 'emf') emf = value
    else if (key === 'tempC') tempC = value
    else if (key === 'flag') {
      if (value !== 'open' && value !== 'short' && value !== 'fault') return false
      flag = flagCodes[value]
    } else if (key !== 'seq' && key !== 'probeId' && key !== 'at') return false
  }
  const { probeId, at } = reading
  if (typeof probeId !== 'string' || !isUsualGuid(probeId) || typeof at !== 'string') return false
  const atMs = readUsualInstant(at)
  if (Number.isNaN(atMs)) return false
  cells.probeId = probeId
  cells.atMs = atMs
  cells.flag = flag
  cells.emfTenthUv = null
  cells.coldCentiC = null
  cells.tempCentiC = null
  if (emf !== undefined) return tempC === undefined && readUsualEmf(emf, cells)
  if (tempC === undefined) return flag > 0
  if (typeof tempC !== 'number' || !(tempC >= -300 && tempC <= 3_000)) return false
  cells.tempCentiC = Math.round(tempC * 100)
  return true
}

function readUsualEmf(emf: unknown, cells: ReadingCells): boolean {
  if (typeof emf !== 'object' || emf === null) return false
  if (!('microvolts' in emf) || !('coldJunctionC' in emf)) return false
  const { microvolts, coldJunctionC } = emf
  let keys = 0
  for (const _key in emf) keys += 1
  if (keys !== 2) return false
  if (typeof microvolts !== 'number' || typeof coldJunctionC !== 'number') return false
  if (!(microvolts >= -200_000 && microvolts <= 200_000)) return false
  if (!(coldJunctionC >= -60 && coldJunctionC <= 125)) return false
  cells.emfTenthUv = Math.round(microvolts * 10)
  cells.coldCentiC = Math.round(coldJunctionC * 100)
  return true
}

/** 36 lower-case hexadecimal digits and dashes in their places. */
function isUsualGuid(text: string): boolean {
  if (text.length !== 36) return false
  for (let i = 0; i < 36; i += 1) {
    const code = text.charCodeAt(i)
    const isDashPlace = i === 8 || i === 13 || i === 18 || i === 23
    const isHex = (code >= 48 && code <= 57) || (code >= 97 && code <= 102)
    if (isDashPlace ? code !== 45 : !isHex) return false
  }
  return true
}

/** `2026-03-01T10:00:00.000Z` of the day last passed by the schema, in ms since 1970; NaN for anything else. */
function readUsualInstant(text: string): number {
  if (text.length !== 24 || !text.startsWith(knownDay.text) || knownDay.text === '') return NaN
  if (text[10] !== 'T' || text[13] !== ':' || text[16] !== ':' || text[19] !== '.' || text[23] !== 'Z')
    return NaN
  const hours = digit(text, 11) * 10 + digit(text, 12)
  const minutes = digit(text, 14) * 10 + digit(text, 15)
  const seconds = digit(text, 17) * 10 + digit(text, 18)
  const ms = digit(text, 20) * 100 + digit(text, 21) * 10 + digit(text, 22)
  if (!(hours <= 23 && minutes <= 59 && seconds <= 59)) return NaN
  return knownDay.startMs + ((hours * 60 + minutes) * 60 + seconds) * 1000 + ms
}

function digit(text: string, index: number): number {
  const value = text.charCodeAt(index) - 48
  return value >= 0 && value <= 9 ? value : NaN
}

function readBySchema(reading: RawReading, cells: ReadingCells): string | null {
  const parsed = readingSchema.safeParse(reading)
  if (!parsed.success) {
    const issue = parsed.error.issues[0]
    const path = issue?.path.map(String).join('.') ?? ''
    return `${path === '' ? 'reading' : path}: ${issue?.message ?? 'does not fit'}`.slice(0, 200)
  }
  const { probeId, at, emf, tempC, flag } = parsed.data
  cells.probeId = probeId.toLowerCase()
  cells.atMs = Date.parse(at)
  cells.emfTenthUv = emf === undefined ? null : Math.round(emf.microvolts * 10)
  cells.coldCentiC = emf === undefined ? null : Math.round(emf.coldJunctionC * 100)
  cells.tempCentiC = tempC === undefined ? null : Math.round(tempC * 100)
  cells.flag = flag === undefined ? 0 : flagCodes[flag]
  if (at.length === 24 && at.endsWith('Z')) {
    knownDay.text = at.slice(0, 10)
    knownDay.startMs = Date.parse(`${knownDay.text}T00:00:00.000Z`)
  }
  return null
}
