import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { readingSchema, type Reading } from '@/lib/gateway/protocol'
import { createSpool, DAMAGED_REASON, DISK_REASON, FULL_REASON, type ReadingDraft } from '@/lib/gateway/spool'
import { openSpoolFolder, type SpoolFiles } from '@/lib/gateway/spool-files'
import { decodeRecords, encodeRecord, roundedReading } from '@/lib/gateway/spool-record'

const SEED = 20260201
const PROBE = '8f14e45f-ceea-467f-a1b2-0c5d6e7f8a9b'
const BOOTS = ['00000000-0000-4000-8000-000000000001', '00000000-0000-4000-8000-000000000002'] as const
const THIRD_BOOT = '00000000-0000-4000-8000-000000000003'

/** A disk in memory that can be filled up and cut off at any byte. */
function memoryFiles(roomBytes = Infinity): SpoolFiles & { store: Map<string, Buffer>; roomBytes: number } {
  const store = new Map<string, Buffer>()
  const files = {
    store,
    roomBytes,
    list: () => [...store.keys()],
    read: (name: string) => store.get(name) ?? Buffer.alloc(0),
    append: (name: string, bytes: Buffer) => {
      const used = [...store.values()].reduce((sum, file) => sum + file.length, 0)
      const fits = Math.max(0, Math.min(bytes.length, files.roomBytes - used))
      store.set(name, Buffer.concat([files.read(name), bytes.subarray(0, fits)]))
      if (fits < bytes.length) throw Object.assign(new Error('no space left on device'), { code: 'ENOSPC' })
    },
    remove: (name: string) => void store.delete(name),
    flush: () => {},
  }
  return files
}

function draft(i: number): ReadingDraft {
  return {
    probeId: PROBE,
    at: new Date(1_790_000_000_000 + i * 200).toISOString(),
    emf: { microvolts: 4_000 + i, coldJunctionC: 23.25 },
  }
}

function drafts(count: number, from = 0): ReadingDraft[] {
  return Array.from({ length: count }, (_, i) => draft(from + i))
}

function seqs(readings: readonly Reading[]): number[] {
  return readings.map((reading) => reading.seq)
}

/** Everything that a spool still gives out, by taking and acknowledging in turn. */
function drain(files: SpoolFiles, bootId: string, limit = 7) {
  const spool = createSpool({ files, bootId, segmentBytes: 400 })
  const readings: { bootId: string; reading: Reading }[] = []
  const lost: { bootId: string; from: number; to: number; reason: string }[] = []
  for (let batch = spool.peek(limit); batch !== null; batch = spool.peek(limit)) {
    const { bootId: of } = batch
    readings.push(...batch.readings.map((reading) => ({ bootId: of, reading })))
    for (const loss of batch.lost)
      if (!lost.some((known) => known.from === loss.from)) lost.push({ bootId: of, ...loss })
    const highest = Math.max(
      batch.readings.at(-1)?.seq ?? 0,
      batch.readings.length === 0 ? (batch.lost.at(-1)?.to ?? 0) : 0,
    )
    spool.acknowledge(of, highest)
  }
  return { readings, lost, left: spool.status() }
}

const instantMs = fc.integer({ min: 0, max: 4_102_444_800_000 })
const anyReading: fc.Arbitrary<Reading> = fc
  .record({
    seq: fc.integer({ min: 1, max: 2 ** 45 }),
    probeId: fc.uuid(),
    at: instantMs.map((ms) => new Date(ms).toISOString()),
    value: fc.oneof(
      fc.record({
        emf: fc.record({
          microvolts: fc.integer({ min: -2_000_000, max: 2_000_000 }).map((tenths) => tenths / 10),
          coldJunctionC: fc.integer({ min: -6_000, max: 12_500 }).map((hundredths) => hundredths / 100),
        }),
      }),
      fc.record({ tempC: fc.integer({ min: -30_000, max: 300_000 }).map((hundredths) => hundredths / 100) }),
      fc.constant({ flag: 'open' as const }),
    ),
    flag: fc.constantFrom(undefined, 'open', 'short', 'fault'),
  })
  .map(({ value, flag, ...rest }) => ({ ...rest, ...(flag === undefined ? {} : { flag }), ...value }))

describe('spool records', () => {
  it('what is written is read back equal, and fits the protocol', () => {
    fc.assert(
      fc.property(anyReading, (reading) => {
        const { records } = decodeRecords(encodeRecord({ kind: 'reading', reading }))
        expect(records).toEqual([{ kind: 'reading', reading }])
        expect(readingSchema.safeParse(reading).success).toBe(true)
      }),
      { seed: SEED },
    )
  })

  it('values are rounded as the server keeps them', () => {
    const reading = {
      seq: 1,
      probeId: PROBE,
      at: '2026-02-01T10:00:00.1239Z',
      emf: { microvolts: 8138.249, coldJunctionC: 23.456 },
    }
    expect(roundedReading(reading)).toEqual({
      seq: 1,
      probeId: PROBE,
      at: '2026-02-01T10:00:00.123Z',
      emf: { microvolts: 8138.2, coldJunctionC: 23.46 },
    })
  })

  it('a damaged byte loses at most the record that it is in, and never yields another', () => {
    const all = drafts(12).map((one, i) => ({ ...one, seq: i + 1 }))
    const bytes = Buffer.concat(all.map((reading) => encodeRecord({ kind: 'reading', reading })))
    fc.assert(
      fc.property(fc.nat(bytes.length - 1), fc.integer({ min: 1, max: 255 }), (at, change) => {
        const damaged = Buffer.from(bytes)
        damaged[at] = (damaged[at] ?? 0) ^ change
        const found = decodeRecords(damaged).records
        expect(found.length).toBe(all.length - 1)
        for (const record of found)
          expect(all).toContainEqual(record.kind === 'reading' ? record.reading : null)
      }),
      { seed: SEED, numRuns: 400 },
    )
  })
})

describe('spool', () => {
  it('gives readings in order and drops what was acknowledged', () => {
    const spool = createSpool({ files: memoryFiles(), bootId: BOOTS[0], segmentBytes: 300 })
    expect(spool.append(drafts(20))).toEqual({ from: 1, to: 20, kept: true, dropped: 0 })
    expect(seqs(spool.peek(5)?.readings ?? [])).toEqual([1, 2, 3, 4, 5])
    spool.acknowledge(BOOTS[0], 18)
    expect(seqs(spool.peek(5)?.readings ?? [])).toEqual([19, 20])
    spool.acknowledge(BOOTS[0], 20)
    expect(spool.peek(5)).toBeNull()
  })

  it('frees the disk when everything was acknowledged', () => {
    const files = memoryFiles()
    const spool = createSpool({ files, bootId: BOOTS[0], segmentBytes: 500 })
    for (let i = 0; i < 50; i += 1) {
      spool.append(drafts(10, i * 10))
      spool.acknowledge(BOOTS[0], (i + 1) * 10)
    }
    expect([...files.store.values()].reduce((sum, file) => sum + file.length, 0)).toBeLessThan(1_500)
  })

  it('after a cut at any byte gives every whole unacknowledged reading once, in order, and none that is corrupt', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: 1, max: 9 }), { minLength: 1, maxLength: 12 }),
        fc.nat(100),
        fc.nat(10_000),
        (batches, ackedShare, cut) => {
          const files = memoryFiles()
          const spool = createSpool({ files, bootId: BOOTS[0], segmentBytes: 400 })
          const written: Reading[] = []
          for (const count of batches) {
            const { from } = spool.append(drafts(count, written.length))
            written.push(
              ...drafts(count, written.length).map((one, i) => roundedReading({ ...one, seq: from + i })),
            )
          }
          const acked = Math.floor((written.length * ackedShare) / 100)
          spool.acknowledge(BOOTS[0], acked)
          // The newest file is cut short, as by a loss of power.
          const newest = files.list().sort().at(-1)
          const bytes = newest === undefined ? Buffer.alloc(0) : files.read(newest)
          const kept = bytes.subarray(0, cut % (bytes.length + 1))
          if (newest !== undefined) files.store.set(newest, Buffer.from(kept))
          const torn = decodeRecords(bytes).records.length - decodeRecords(kept).records.length

          const after = drain(files, BOOTS[1])
          const got = after.readings.map(({ reading }) => reading)
          // Never one that was not written, never twice, never out of order.
          for (const reading of got) expect(reading).toEqual(written[reading.seq - 1])
          expect(seqs(got)).toEqual([...new Set(seqs(got))].sort((a, b) => a - b))
          // Only what the cut tore off may be missing, and only from the end.
          const highest = got.at(-1)?.seq ?? acked
          expect(written.length - highest).toBeLessThanOrEqual(Math.max(torn, 0))
          for (let seq = acked + 1; seq <= highest; seq += 1) expect(seqs(got)).toContain(seq)
          expect(after.lost).toEqual([])
          expect(after.left.waiting).toBe(0)
        },
      ),
      { seed: SEED, numRuns: 300 },
    )
  })

  it('declares numbers lost that damage took from the middle', () => {
    const files = memoryFiles()
    const spool = createSpool({ files, bootId: BOOTS[0] })
    spool.append(drafts(10))
    const name = files.list()[0] ?? ''
    const bytes = Buffer.from(files.read(name))
    const fourth = encodeRecord({ kind: 'reading', reading: { ...draft(3), seq: 4 } })
    bytes.fill(0, bytes.indexOf(fourth), bytes.indexOf(fourth) + fourth.length)
    files.store.set(name, bytes)
    const after = drain(files, BOOTS[1], 100)
    expect(after.lost).toEqual([{ bootId: BOOTS[0], from: 4, to: 4, reason: DAMAGED_REASON }])
    expect(after.readings.map(({ reading }) => reading.seq)).toEqual([1, 2, 3, 5, 6, 7, 8, 9, 10])
  })

  it('readings of an old boot come first, under the old boot id', () => {
    const files = memoryFiles()
    createSpool({ files, bootId: BOOTS[1] }).append(drafts(3))
    createSpool({ files, bootId: BOOTS[0] }).append(drafts(2))
    const spool = createSpool({ files, bootId: THIRD_BOOT })
    spool.append(drafts(1))
    const order: [string, number[]][] = []
    for (let batch = spool.peek(10); batch !== null; batch = spool.peek(10)) {
      order.push([batch.bootId, seqs(batch.readings)])
      spool.acknowledge(batch.bootId, batch.readings.at(-1)?.seq ?? 0)
    }
    expect(order).toEqual([
      [BOOTS[1], [1, 2, 3]],
      [BOOTS[0], [1, 2]],
      [THIRD_BOOT, [1]],
    ])
  })

  it('keeps within its size and declares what it had to drop', () => {
    const files = memoryFiles()
    const spool = createSpool({ files, bootId: BOOTS[0], segmentBytes: 500, maxBytes: 2_000 })
    let dropped = 0
    for (let i = 0; i < 40; i += 1) {
      dropped += spool.append(drafts(5, i * 5)).dropped
      expect(spool.status().bytes).toBeLessThanOrEqual(2_500)
    }
    const batch = spool.peek(1_000)
    const first = batch?.readings[0]?.seq ?? 0
    expect(first).toBeGreaterThan(1)
    expect(dropped).toBe(first - 1)
    expect(spool.status()).toMatchObject({ waiting: 200, readings: 200 - dropped })
    expect(batch?.lost).toEqual([{ from: 1, to: first - 1, reason: FULL_REASON }])
    expect(batch?.readings.at(-1)?.seq).toBe(200)
    // The loss survives a restart.
    const after = drain(files, BOOTS[1], 1_000)
    expect(after.lost).toEqual([{ bootId: BOOTS[0], from: 1, to: first - 1, reason: FULL_REASON }])
  })

  it('on a full disk every number is either kept or declared lost, however much room there is', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 3_000 }),
        fc.array(fc.integer({ min: 1, max: 12 }), { maxLength: 15 }),
        (room, batches) => {
          const files = memoryFiles(room)
          const spool = createSpool({ files, bootId: BOOTS[0], segmentBytes: 300 })
          let total = 0
          for (const count of batches) {
            spool.append(drafts(count, total))
            total += count
          }
          const batch = spool.peek(10_000)
          const accounted = new Set(seqs(batch?.readings ?? []))
          for (const { from, to } of batch?.lost ?? [])
            for (let seq = from; seq <= to; seq += 1) accounted.add(seq)
          expect(accounted.size).toBe(total)
          for (const reading of batch?.readings ?? []) {
            expect(reading).toEqual(roundedReading({ ...draft(reading.seq - 1), seq: reading.seq }))
          }
        },
      ),
      { seed: SEED, numRuns: 300 },
    )
  })

  it('a disk that fails for another reason costs no older reading', () => {
    const files = memoryFiles()
    const spool = createSpool({ files, bootId: BOOTS[0], segmentBytes: 300 })
    spool.append(drafts(30))
    const append = files.append
    files.append = () => {
      throw Object.assign(new Error('input/output error'), { code: 'EIO' })
    }
    expect(spool.append(drafts(2, 30)).kept).toBe(false)
    files.append = append
    const batch = spool.peek(100)
    expect(seqs(batch?.readings ?? [])).toEqual(Array.from({ length: 30 }, (_, i) => i + 1))
    expect(batch?.lost).toEqual([{ from: 31, to: 32, reason: DISK_REASON }])
  })

  it('when the server has forgotten, what is here is sent again and the rest is declared lost', () => {
    const spool = createSpool({ files: memoryFiles(), bootId: BOOTS[0], segmentBytes: 300 })
    for (let i = 0; i < 40; i += 5) spool.append(drafts(5, i))
    spool.acknowledge(BOOTS[0], 38)
    spool.acknowledge(BOOTS[0], 0)
    const batch = spool.peek(100)
    const first = batch?.readings[0]?.seq ?? 0
    expect(first).toBeGreaterThan(1)
    expect(batch?.lost).toEqual([{ from: 1, to: first - 1, reason: DAMAGED_REASON }])
    expect(batch?.readings.at(-1)?.seq).toBe(40)
    spool.acknowledge(BOOTS[0], 40)
    expect(spool.peek(100)).toBeNull()
  })

  it('a first reading that damage took is declared lost once the server says that it has not got it', () => {
    const files = memoryFiles()
    createSpool({ files, bootId: BOOTS[0] }).append(drafts(4))
    const name = files.list()[0] ?? ''
    const bytes = Buffer.from(files.read(name))
    const first = encodeRecord({ kind: 'reading', reading: { ...draft(0), seq: 1 } })
    bytes.fill(0, bytes.indexOf(first), bytes.indexOf(first) + first.length)
    files.store.set(name, bytes)
    const spool = createSpool({ files, bootId: BOOTS[1] })
    expect(spool.peek(10)).toMatchObject({ lost: [] })
    spool.acknowledge(BOOTS[0], 0)
    expect(spool.peek(10)?.lost).toEqual([{ from: 1, to: 1, reason: DAMAGED_REASON }])
  })

  it('an acknowledgement of more than was ever written drops no later reading', () => {
    const spool = createSpool({ files: memoryFiles(), bootId: BOOTS[0] })
    spool.append(drafts(3))
    spool.acknowledge(BOOTS[0], 1_000)
    spool.append(drafts(2, 3))
    expect(seqs(spool.peek(10)?.readings ?? [])).toEqual([4, 5])
  })

  it('cut at every byte of its last record, all that is before it comes whole and nothing is invented', () => {
    const files = memoryFiles()
    const before = createSpool({ files, bootId: BOOTS[0] })
    before.append(drafts(5))
    const [name] = files.list()
    const whole = files.read(name ?? '')
    const recordBytes = encodeRecord({ kind: 'reading', reading: { ...draft(4), seq: 5 } }).length
    for (let cut = 0; cut <= recordBytes; cut += 1) {
      const torn = memoryFiles()
      torn.append(name ?? '', whole.subarray(0, whole.length - cut))
      const { readings, lost } = drain(torn, BOOTS[1])
      expect(readings.map(({ reading }) => reading.seq)).toEqual(cut === 0 ? [1, 2, 3, 4, 5] : [1, 2, 3, 4])
      expect(readings.map(({ reading }) => reading.emf?.microvolts)).toEqual(
        readings.map((_, i) => draft(i).emf?.microvolts),
      )
      // The last number never reached the disk, so nobody was told of it: there is nothing to declare.
      expect(lost).toEqual([])
    }
  })

  it('a clock that was set dates what is unsent anew, also after a restart, and no other boot', () => {
    const files = memoryFiles()
    const spool = createSpool({ files, bootId: BOOTS[0], segmentBytes: 200 })
    spool.append(drafts(6))
    spool.acknowledge(BOOTS[0], 2)
    spool.setClockShift(3_600_000.4)
    spool.append(drafts(2, 6))
    const atOf = (i: number, shiftMs: number) => new Date(Date.parse(draft(i).at) + shiftMs).toISOString()
    const expected = [2, 3, 4, 5, 6, 7].map((i) => atOf(i, 3_600_000))
    expect(spool.peek(100)?.readings.map(({ at }) => at)).toEqual(expected)
    const next = createSpool({ files, bootId: BOOTS[1] })
    next.append(drafts(1))
    expect(next.peek(100)?.readings.map(({ at }) => at)).toEqual(expected)
    next.acknowledge(BOOTS[0], 8)
    expect(next.peek(100)?.readings.map(({ at }) => at)).toEqual([atOf(0, 0)])
  })

  it('works on a real disk through a restart', () => {
    const folder = mkdtempSync(join(tmpdir(), 'emberstave-spool-'))
    try {
      const first = openSpoolFolder(folder)
      const spool = createSpool({ files: first, bootId: BOOTS[0] })
      spool.append(drafts(100))
      spool.acknowledge(BOOTS[0], 60)
      first.close()
      const second = openSpoolFolder(folder)
      const after = drain(second, BOOTS[1], 1_000)
      expect(after.readings.map(({ reading }) => reading.seq)).toEqual(
        Array.from({ length: 40 }, (_, i) => i + 61),
      )
      expect(second.list()).toEqual([])
      second.close()
    } finally {
      rmSync(folder, { recursive: true })
    }
  })
})
