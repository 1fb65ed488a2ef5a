import type { Loss, Reading } from './protocol'
import type { SpoolFiles } from './spool-files'
import { decodeRecords, encodeRecord, roundedReading, type SpoolRecord } from './spool-record'

export type ReadingDraft = Omit<Reading, 'seq'>

/** What is to be sent next: of one boot, in order of `seq`, with the losses that were not yet acknowledged. */
export type SpoolBatch = { bootId: string; readings: Reading[]; lost: Loss[] }

/** `waiting`: numbers that are not acknowledged; `readings`: those of them that are still here to be sent. */
export type SpoolStatus = { bytes: number; waiting: number; readings: number; boots: number; lost: Loss[] }

export type Spool = {
  bootId: string
  /**
   * Gives each reading its number and keeps it. Without room the readings are declared lost: `kept` is false;
   * `dropped` older ones, declared lost too, made room.
   */
  append: (drafts: readonly ReadingDraft[]) => { from: number; to: number; kept: boolean; dropped: number }
  /** The oldest unacknowledged readings, an old boot before this one; null when nothing waits. */
  peek: (limit: number) => SpoolBatch | null
  /** Drops what the server has. A number lower than before means that the server has forgotten: see below. */
  acknowledge: (bootId: string, ackedSeq: number) => void
  /**
   * The box's clock was set, by `shiftMs` in all since this boot began. Readings of this boot that are not sent yet,
   * those before the step too, are given out with it added; it is kept for the next start.
   */
  setClockShift: (shiftMs: number) => void
  flush: () => void
  status: () => SpoolStatus
}

type Segment = { name: string; bytes: number; firstSeq: number; lastSeq: number; readings: Reading[] | null }
type Boot = {
  bootId: string
  ordinal: number
  segments: Segment[]
  writing: Segment | null
  ackedSeq: number
  highestSeq: number
  losses: Loss[]
  clockShiftMs: number
}
type SpoolOptions = { files: SpoolFiles; bootId: string; maxBytes?: number; segmentBytes?: number }

export const FULL_REASON = 'the spool was full, the oldest readings were dropped'
export const DISK_REASON = 'the disk took no more readings'
export const DAMAGED_REASON = 'the spool was damaged'

const SEGMENT_NAME = /^(\d{8})-([0-9a-f-]{36})-(\d{8})\.seg$/

/**
 * Keeps readings on disk until the server has acknowledged them.
 *
 * Segment files `<boot number>-<boot id>-<segment number>.seg` are only ever appended to by the process that made
 * them; after a restart old files are read, sent under their own boot id, and removed. A torn or damaged record is
 * never given out: numbers that are missing between kept ones are declared lost. At most `maxBytes` are used
 * (default 256 MiB, at least four segments): then the oldest segment goes, and its numbers are declared lost.
 *
 * When the server acknowledges less than before (it was restored from a backup), what is still here is sent again
 * and what is not is declared lost, so that its count can go on.
 */
export function createSpool(options: SpoolOptions): Spool {
  const { files, bootId, segmentBytes = 256 * 1024 } = options
  const maxBytes = Math.max(options.maxBytes ?? 256 * 1024 * 1024, 4 * segmentBytes)
  const boots = loadBoots(files)
  const current = newBoot(bootId, Math.max(0, ...boots.map((boot) => boot.ordinal)) + 1)
  boots.push(current)

  let droppedSoFar = 0
  const totalBytes = () => boots.reduce((sum, boot) => sum + bytesOf(boot), 0)

  const writingSegment = (boot: Boot): Segment => {
    if (boot.writing !== null && boot.writing.bytes < segmentBytes) return boot.writing
    const segment = newSegment(boot)
    boot.segments.push(segment)
    boot.writing = segment
    // A new segment repeats what older ones noted, so that they can be removed.
    writeRecords(segment, notesOf(boot))
    return segment
  }
  const writeRecords = (segment: Segment, records: readonly SpoolRecord[]) => {
    const bytes = Buffer.concat(records.map(encodeRecord))
    segment.bytes += bytes.length
    files.append(segment.name, bytes)
  }
  const tryNote = (boot: Boot) => {
    try {
      writeRecords(writingSegment(boot), notesOf(boot))
    } catch {
      // A full disk: the note is only a saving. What it says is found again from the numbers at the next start.
      boot.writing = null
    }
  }
  const removeSegment = (boot: Boot, segment: Segment) => {
    files.remove(segment.name)
    boot.segments = boot.segments.filter((other) => other !== segment)
    if (boot.writing === segment) boot.writing = null
  }
  const dropOldest = (): boolean => {
    for (const boot of boots) {
      const oldest = boot.segments.find((segment) => segment.lastSeq > 0)
      if (oldest === undefined) continue
      if (boot === current && oldest === boot.writing) return false
      removeSegment(boot, oldest)
      if (oldest.lastSeq > boot.ackedSeq) {
        const first = Math.max(oldest.firstSeq, boot.ackedSeq + 1)
        addLoss(boot, first, oldest.lastSeq, FULL_REASON)
        droppedSoFar += oldest.lastSeq + 1 - first
      }
      tryNote(boot)
      return true
    }
    return false
  }
  const keep = (readings: Reading[], records: SpoolRecord[]): boolean => {
    for (let room = true; room; room = dropOldest()) {
      try {
        const segment = writingSegment(current)
        writeRecords(segment, records)
        segment.readings?.push(...readings)
        segment.firstSeq ||= readings[0]?.seq ?? 0
        segment.lastSeq = readings.at(-1)?.seq ?? segment.lastSeq
        return true
      } catch (error) {
        // What was half written is skipped when read; the next try goes to a fresh segment.
        current.writing = null
        if (!isFullDisk(error)) return false
      }
    }
    return false
  }
  const forgetWhenDone = (boot: Boot) => {
    if (boot === current || boot.ackedSeq < boot.highestSeq || boot.losses.length > 0) return
    for (const segment of boot.segments) files.remove(segment.name)
    boots.splice(boots.indexOf(boot), 1)
  }
  for (const boot of [...boots]) forgetWhenDone(boot)

  return {
    bootId,
    append: (drafts) => {
      const from = current.highestSeq + 1
      const readings = drafts.map((draft, i) => roundedReading({ ...draft, seq: from + i }))
      const to = from + readings.length - 1
      if (readings.length === 0) return { from, to, kept: true, dropped: 0 }
      const droppedBefore = droppedSoFar
      const kept = keep(
        readings,
        readings.map((reading) => ({ kind: 'reading', reading })),
      )
      current.highestSeq = to
      if (!kept) {
        addLoss(current, from, to, DISK_REASON)
        tryNote(current)
      }
      while (totalBytes() > maxBytes && dropOldest());
      return { from, to, kept, dropped: droppedSoFar - droppedBefore }
    },
    peek: (limit) => {
      for (const boot of boots) {
        const readings = waitingReadings(files, boot, limit)
        if (readings.length > 0 || boot.losses.length > 0) {
          return {
            bootId: boot.bootId,
            readings: shifted(readings, boot.clockShiftMs),
            lost: [...boot.losses],
          }
        }
      }
      return null
    },
    acknowledge: (ackedBootId, ackedSeq) => {
      const boot = boots.find((known) => known.bootId === ackedBootId)
      if (boot === undefined) return
      const before = boot.ackedSeq
      boot.ackedSeq = Math.min(ackedSeq, boot.highestSeq)
      boot.losses = boot.losses.filter((loss) => loss.to > boot.ackedSeq)
      if (boot.ackedSeq < before) declareMissing(files, boot)
      for (const segment of boot.segments) {
        const isDone = segment.lastSeq <= boot.ackedSeq && segment !== boot.writing
        if (isDone) removeSegment(boot, segment)
      }
      forgetWhenDone(boot)
      if (boot.ackedSeq !== before && boots.includes(boot)) tryNote(boot)
    },
    setClockShift: (shiftMs) => {
      current.clockShiftMs = Math.round(shiftMs)
      tryNote(current)
    },
    flush: () => files.flush(),
    status: () => ({
      bytes: totalBytes(),
      waiting: boots.reduce((sum, boot) => sum + boot.highestSeq - boot.ackedSeq, 0),
      readings: boots.reduce((sum, boot) => sum + boot.highestSeq - boot.ackedSeq - lostCount(boot), 0),
      boots: boots.length,
      lost: boots.flatMap((boot) => boot.losses),
    }),
  }
}

/** Only a full disk is a reason to drop what is older; any other fault of the disk leaves it alone. */
function isFullDisk(error: unknown): boolean {
  return error instanceof Error && 'code' in error && (error.code === 'ENOSPC' || error.code === 'EDQUOT')
}

function newBoot(bootId: string, ordinal: number): Boot {
  return {
    bootId,
    ordinal,
    segments: [],
    writing: null,
    ackedSeq: 0,
    highestSeq: 0,
    losses: [],
    clockShiftMs: 0,
  }
}

function newSegment(boot: Boot): Segment {
  const last = boot.segments.at(-1)
  const number = last === undefined ? 1 : Number(SEGMENT_NAME.exec(last.name)?.[3] ?? 0) + 1
  const name = `${String(boot.ordinal).padStart(8, '0')}-${boot.bootId}-${String(number).padStart(8, '0')}.seg`
  return { name, bytes: 0, firstSeq: 0, lastSeq: 0, readings: [] }
}

function bytesOf(boot: Boot): number {
  return boot.segments.reduce((sum, segment) => sum + segment.bytes, 0)
}

/** Lost numbers that are not acknowledged yet. */
function lostCount(boot: Boot): number {
  return boot.losses.reduce((sum, loss) => sum + loss.to + 1 - Math.max(loss.from, boot.ackedSeq + 1), 0)
}

function notesOf(boot: Boot): SpoolRecord[] {
  return [
    { kind: 'acknowledged', ackedSeq: boot.ackedSeq },
    ...boot.losses.map((loss): SpoolRecord => ({ kind: 'loss', loss })),
    ...(boot.clockShiftMs === 0 ? [] : [{ kind: 'clock' as const, shiftMs: boot.clockShiftMs }]),
  ]
}

function shifted(readings: Reading[], shiftMs: number): Reading[] {
  if (shiftMs === 0) return readings
  return readings.map((reading) => ({
    ...reading,
    at: new Date(Date.parse(reading.at) + shiftMs).toISOString(),
  }))
}

/** Adds a range of lost numbers, one entry for neighbours with the same reason. */
function addLoss(boot: Boot, from: number, to: number, reason: string) {
  const neighbour = boot.losses.find(
    (loss) => loss.reason === reason && loss.from <= to + 1 && from <= loss.to + 1,
  )
  if (neighbour === undefined) {
    boot.losses = [...boot.losses, { from, to, reason }].sort((a, b) => a.from - b.from)
    return
  }
  boot.losses = boot.losses.filter((loss) => loss !== neighbour)
  addLoss(boot, Math.min(from, neighbour.from), Math.max(to, neighbour.to), reason)
}

/** Declares every number lost that is above the acknowledged one, is not here, and is not yet declared. */
function declareMissing(files: SpoolFiles, boot: Boot) {
  const present = boot.segments
    .filter((segment) => segment.lastSeq > boot.ackedSeq)
    .flatMap((segment) => readingRanges(files, segment))
  const known = [...present, ...boot.losses].sort((a, b) => a.from - b.from)
  let expected = boot.ackedSeq + 1
  for (const range of [...known, { from: boot.highestSeq + 1, to: boot.highestSeq + 1 }]) {
    if (range.from > expected) addLoss(boot, expected, range.from - 1, DAMAGED_REASON)
    expected = Math.max(expected, range.to + 1)
  }
}

function readingRanges(files: SpoolFiles, segment: Segment): { from: number; to: number }[] {
  const ranges: { from: number; to: number }[] = []
  for (const { seq } of segment.readings ?? readSegment(files, segment.name)) {
    const last = ranges.at(-1)
    if (last !== undefined && seq === last.to + 1) last.to = seq
    else ranges.push({ from: seq, to: seq })
  }
  return ranges
}

function waitingReadings(files: SpoolFiles, boot: Boot, limit: number): Reading[] {
  const waiting: Reading[] = []
  for (const segment of boot.segments) {
    if (segment.lastSeq <= boot.ackedSeq) continue
    if (waiting.length >= limit) {
      // Only what is sent next and what is being written stays in memory.
      if (segment !== boot.writing) segment.readings = null
      continue
    }
    segment.readings ??= readSegment(files, segment.name)
    for (const reading of segment.readings) {
      const last = waiting.at(-1)?.seq ?? boot.ackedSeq
      if (reading.seq > last && waiting.length < limit) waiting.push(reading)
    }
  }
  return waiting
}

/** The readings of one file, each number once, rising. */
function readSegment(files: SpoolFiles, name: string): Reading[] {
  const readings: Reading[] = []
  for (const record of decodeRecords(files.read(name)).records) {
    if (record.kind !== 'reading') continue
    if (record.reading.seq > (readings.at(-1)?.seq ?? 0)) readings.push(record.reading)
  }
  return readings
}

/** Reads what an earlier process left, oldest boot first. */
function loadBoots(files: SpoolFiles): Boot[] {
  const boots: Boot[] = []
  for (const name of files.list().sort()) {
    const parts = SEGMENT_NAME.exec(name)
    if (parts === null) continue
    const [, ordinal = '', bootId = ''] = parts
    let boot = boots.at(-1)
    if (boot?.bootId !== bootId) {
      boot = newBoot(bootId, Number(ordinal))
      boots.push(boot)
    }
    loadSegment(files, boot, name)
  }
  for (const boot of boots) {
    boot.losses = boot.losses.filter((loss) => loss.to > boot.ackedSeq)
    // The note of an acknowledgement may be torn off while its readings are already removed: what is missing in front
    // is taken as acknowledged. If it was not, the server's next answer says so, and then it is declared lost.
    const firsts = boot.segments.filter((segment) => segment.lastSeq > 0).map((segment) => segment.firstSeq)
    const firstHere = Math.min(...firsts, ...boot.losses.map((loss) => loss.from), boot.highestSeq + 1)
    boot.ackedSeq = Math.max(boot.ackedSeq, firstHere - 1)
    declareMissing(files, boot)
  }
  return boots
}

function loadSegment(files: SpoolFiles, boot: Boot, name: string) {
  const bytes = files.read(name)
  const segment: Segment = { name, bytes: bytes.length, firstSeq: 0, lastSeq: 0, readings: null }
  for (const record of decodeRecords(bytes).records) {
    if (record.kind === 'acknowledged') {
      boot.ackedSeq = Math.max(boot.ackedSeq, record.ackedSeq)
      boot.highestSeq = Math.max(boot.highestSeq, record.ackedSeq)
    } else if (record.kind === 'clock') {
      boot.clockShiftMs = record.shiftMs
    } else if (record.kind === 'loss') {
      addLoss(boot, record.loss.from, record.loss.to, record.loss.reason)
      boot.highestSeq = Math.max(boot.highestSeq, record.loss.to)
    } else {
      const { seq } = record.reading
      segment.firstSeq ||= seq
      segment.lastSeq = Math.max(segment.lastSeq, seq)
      boot.highestSeq = Math.max(boot.highestSeq, seq)
    }
  }
  boot.segments.push(segment)
}
