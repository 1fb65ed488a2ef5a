import { setTimeout as sleep } from 'node:timers/promises'
import { issueGatewayToken } from '@/lib/ingest/issue-gateway-token'
import { revokeGatewayToken } from '@/lib/ingest/revoke-gateway-token'
import type { FaultKind } from '@/tests/faults/deck'
import { killPostgres, startPostgres } from '@/tests/faults/postgres'
import type { GatewayRig, Rig } from '@/tests/faults/rig'
import { retried } from '@/tests/faults/store'

export type Stage = {
  rig: Rig
  random: () => number
  /** How this cut is; null for a short one. */
  longCut: LongCut | null
}

/** A long cut: refused at once, or a pulled cable, of which nobody is told. */
export type LongCut = { seconds: number; isSilent: boolean }

/** Breaks something; what it answers mends it. */
type Act = (stage: Stage) => Promise<() => Promise<void>>

const nothing = async () => {}

export const acts: Record<FaultKind, Act> = {
  'server killed': async ({ rig, random }) => {
    await rig.server.kill()
    await sleep(300 * random())
    return async () => rig.server.start()
  },
  'PostgreSQL killed': async ({ rig, random }) => {
    await killPostgres(rig.cluster)
    await sleep(300 * random())
    return () => startPostgres(rig.cluster)
  },
  'gateway killed': async ({ rig, random }) => {
    const gateway = one([...touchable(rig), rig.program], random)
    await gateway.kill()
    await sleep(300 * random())
    return async () => gateway.start()
  },
  'disk full': async ({ rig, random }) => {
    const gateway = one(touchable(rig), random)
    // While the server is out of reach what the disk cannot hold is truly gone.
    const isCut = random() < 0.5
    if (isCut) rig.lines.gateways.put({ kind: 'cut' })
    gateway.disk.fill()
    if (gateway.disk.kind === 'injected') gateway.command({ kind: 'disk', isFull: true, delayMs: 0 })
    await sleep(4_000 + 2_500 * random())
    return async () => {
      gateway.disk.free()
      if (gateway.disk.kind === 'injected') gateway.command({ kind: 'disk', isFull: false, delayMs: 0 })
      if (isCut) rig.lines.gateways.put({ kind: 'open' })
    }
  },
  'network cut': ({ rig, random, longCut }) =>
    longCut === null
      ? putLines(rig, { kind: 'cut' }, 500 + 3_500 * random())
      : putLines(rig, { kind: longCut.isSilent ? 'held' : 'cut' }, 1_000 * longCut.seconds),
  'network slow': ({ rig, random }) =>
    putLines(rig, { kind: 'slow', delayMs: 100 + 1_500 * random() }, 3_000 + 2_000 * random()),
  'network held': ({ rig, random }) => putLines(rig, { kind: 'held' }, 500 + 3_500 * random()),
  'answers lost': async ({ rig, random }) => {
    rig.lines.gateways.put({ kind: 'deaf' })
    await sleep(500 + 1_500 * random())
    return async () => rig.lines.gateways.put({ kind: 'open' })
  },
  'disk slow': async ({ rig, random }) => {
    const gateway = one(rig.gateways, random)
    gateway.command({ kind: 'disk', isFull: false, delayMs: 20 + 130 * random() })
    await sleep(2_000 + 1_000 * random())
    return async () => gateway.command({ kind: 'disk', isFull: false, delayMs: 0 })
  },
  'batches doubled': (stage) => orderBatches(stage, 'doubled'),
  'batches reordered': (stage) => orderBatches(stage, 'reordered'),
  'batches late': (stage) => orderBatches(stage, 'late'),
  'clock set': async ({ rig, random }) => {
    const gateway = one(touchable(rig), random)
    gateway.command({ kind: 'clock', aheadMs: Math.round((random() < 0.5 ? -1 : 1) * 60_000 * random()) })
    await sleep(1_000)
    return nothing
  },
  'token revoked': async ({ rig, random }) => {
    const gateway = one(rig.gateways, random)
    const { administrator } = rig.people
    const { gatewayId, tokenId } = gateway.identity
    await retried(() => revokeGatewayToken(administrator.actor, { gatewayId, tokenId }))
    await sleep(1_000 + 1_000 * random())
    return async () => {
      const issued = await retried(() => issueGatewayToken(administrator.actor, { gatewayId }))
      gateway.identity.tokenId = issued.id
      gateway.writeToken(issued.token)
    }
  },
}

function one<T>(all: readonly T[], random: () => number): T {
  const chosen = all[Math.floor(random() * all.length)]
  if (chosen === undefined) throw new Error('there is nothing to choose from')
  return chosen
}

function touchable(rig: Rig): GatewayRig[] {
  return rig.gateways.filter((gateway) => !gateway.isSpared)
}

async function putLines(rig: Rig, state: Parameters<Rig['lines']['gateways']['put']>[0], forMs: number) {
  const lines = Object.values(rig.lines)
  for (const line of lines) line.put(state)
  await sleep(forMs)
  return async () => {
    for (const line of lines) line.put({ kind: 'open' })
  }
}

async function orderBatches({ rig, random }: Stage, order: 'doubled' | 'reordered' | 'late') {
  for (const gateway of rig.gateways) gateway.command({ kind: 'batches', order })
  await sleep(1_500 + 1_500 * random())
  return async () => {
    for (const gateway of rig.gateways) gateway.command({ kind: 'batches', order: 'as they are' })
  }
}
