import { describe, expect, it } from 'vitest'
import { createGateway } from '@/lib/gateway/gateway'
import type { GatewayClock } from '@/lib/gateway/sender'
import type { SpoolFiles } from '@/lib/gateway/spool-files'

const PROBE = '8f14e45f-ceea-467f-a1b2-0c5d6e7f8a9b'

function drafts(count: number) {
  const at = '2026-02-01T10:00:00.000Z'
  return Array.from({ length: count }, () => ({ probeId: PROBE, at, tempC: 20 }))
}

/** A gateway without a way to the server, on a disk whose writes and flushes can be made to fail. */
function makeGateway(maxSpoolBytes?: number) {
  const store = new Map<string, Buffer>()
  const disk = { takes: true, flushes: true }
  const files: SpoolFiles = {
    list: () => [...store.keys()],
    read: (name) => store.get(name) ?? Buffer.alloc(0),
    append: (name, bytes) => {
      if (!disk.takes) throw Object.assign(new Error('input/output error'), { code: 'EIO' })
      store.set(name, Buffer.concat([store.get(name) ?? Buffer.alloc(0), bytes]))
    },
    remove: (name) => void store.delete(name),
    flush: () => {
      if (!disk.flushes) throw new Error('input/output error')
    },
  }
  const alarms: (() => void)[] = []
  const clock: GatewayClock = {
    nowMs: () => Date.parse('2026-02-01T10:00:00.000Z'),
    wait: (_durationMs, then) => {
      alarms.push(then)
      return () => {}
    },
  }
  const said: string[] = []
  const gateway = createGateway({
    files,
    transports: [],
    clock,
    onTrouble: (sentence) => said.push(sentence),
    onRecovered: (sentence) => said.push(sentence),
    ...(maxSpoolBytes === undefined ? {} : { maxSpoolBytes }),
  })
  const ring = () => {
    for (const then of alarms.splice(0)) then()
  }
  const saidOfDisk = () => said.filter((sentence) => !sentence.includes('cannot be reached'))
  return { gateway, disk, ring, saidOfDisk }
}

describe('a disk in trouble', () => {
  it('is said once, with what it cost when it is over, and the lost numbers are declared', () => {
    const { gateway, disk, saidOfDisk } = makeGateway()
    gateway.record(drafts(3))
    disk.takes = false
    for (let i = 0; i < 5; i += 1) gateway.record(drafts(2))
    expect(saidOfDisk()).toEqual([
      'The disk takes no more readings: from number 4 on they are lost, and told so to the server.',
    ])
    disk.takes = true
    gateway.record(drafts(1))
    expect(saidOfDisk().at(-1)).toBe('The disk takes readings again; 10 were lost.')
    expect(gateway.status()).toMatchObject({ waiting: 14, readings: 4, lost: [{ from: 4, to: 13 }] })
  })

  it('that cannot flush does not end the program, and is said once', () => {
    const { gateway, disk, ring, saidOfDisk } = makeGateway()
    gateway.record(drafts(1))
    disk.flushes = false
    for (let i = 0; i < 3; i += 1) {
      ring()
      gateway.record(drafts(1))
    }
    expect(saidOfDisk()).toEqual(['The disk does not keep readings for sure (input/output error).'])
    disk.flushes = true
    ring()
    expect(saidOfDisk()).toHaveLength(2)
  })

  it('a spool at its limit says how many of the oldest it dropped', () => {
    const { gateway, saidOfDisk } = makeGateway(1)
    for (let i = 0; i < 60; i += 1) gateway.record(drafts(1_000))
    expect(saidOfDisk()[0]).toMatch(/^The spool is full: the \d+ oldest readings were dropped/)
    const { lost, readings, waiting } = gateway.status()
    expect(lost).toHaveLength(1)
    expect(readings + (lost[0]?.to ?? 0)).toBe(waiting)
  })
})
