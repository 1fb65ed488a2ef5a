import { randomUUID } from 'node:crypto'
import type { PersonActor } from '@/lib/auth/actor'
import { issueGatewayToken } from '@/lib/ingest/issue-gateway-token'
import { createGateway } from '@/lib/probes/create-gateway'
import { recordProbeCheck } from '@/lib/probes/record-probe-check'
import { recordWaterCheck } from '@/lib/probes/record-water-check'
import { saveHearth } from '@/lib/probes/save-hearth'
import { saveProbe } from '@/lib/probes/save-probe'
import { updateGateway } from '@/lib/probes/update-gateway'
import type { HearthProbe } from '@/simulators/hearth/hearth'
import type { Random } from '@/simulators/hearth/random'
import type { SeedGateway } from '@/simulators/scenarios/play-firing'

export type SeedHearth = {
  id: string
  number: number
  gateway: SeedGateway
  probeIds: Record<HearthProbe, string>
}

export type SeedRoom = {
  hearths: SeedHearth[]
  gateways: { id: string; name: string; token: string; hearths: number[]; isReplay: boolean }[]
}

const places = {
  lead: { name: 'Bilge A', usualRole: 'lead', height: 'bilge', side: 'A', depthMm: 2, mounting: 'wedge' },
  opposite: {
    name: 'Bilge B',
    usualRole: 'opposite',
    height: 'bilge',
    side: 'B',
    depthMm: 2,
    mounting: 'wedge',
  },
  coals: { name: 'Coals', usualRole: 'coals', height: 'coals', side: 'centre', depthMm: 0, mounting: 'hung' },
} as const

const roles = ['lead', 'opposite', 'coals'] as const

/** Hearths with three probes each, read by gateways of up to three hearths; the last gateway may replay for good. */
export async function seedRoom(administrator: PersonActor, hearthCount: number): Promise<SeedRoom> {
  const room: SeedRoom = { hearths: [], gateways: [] }
  const perGateway = Math.min(3, Math.max(1, hearthCount - 1))
  for (let first = 1; first <= hearthCount; first += perGateway) {
    const numbers = Array.from({ length: Math.min(perGateway, hearthCount - first + 1) }, (_, i) => first + i)
    const isReplay = first + perGateway > hearthCount
    const name = isReplay
      ? `Gateway hearth ${numbers.join(', ')} (may replay)`
      : `Gateway hearths ${numbers.join(', ')}`
    // While the past is played every gateway replays; afterwards only the last one does.
    const { id } = await createGateway(administrator, { name, mayReplay: true })
    const { token } = await issueGatewayToken(administrator, { gatewayId: id })
    room.gateways.push({ id, name, token, hearths: numbers, isReplay })
    const gateway: SeedGateway = {
      identity: { gatewayId: id, name, mayReplay: true },
      bootId: randomUUID(),
      nextSeq: 1,
    }
    for (const [index, number] of numbers.entries())
      room.hearths.push(await seedHearth(administrator, gateway, number, index))
  }
  return room
}

async function seedHearth(
  administrator: PersonActor,
  gateway: SeedGateway,
  number: number,
  index: number,
): Promise<SeedHearth> {
  const hearth = await saveHearth(administrator, { number, name: '', isActive: true })
  const probeIds = { lead: '', opposite: '', coals: '' }
  for (const [channel, role] of roles.entries()) {
    const probe = await saveProbe(administrator, {
      ...places[role],
      gatewayId: gateway.identity.gatewayId,
      channel: index * 4 + channel,
      thermocoupleType: 'K',
      iecClass: role === 'coals' ? 2 : 1,
      serial: `H${number}-${role.slice(0, 1).toUpperCase()}-demo`,
      hearthId: hearth.id,
    })
    probeIds[role] = probe.id
  }
  return { id: hearth.id, number, gateway, probeIds }
}

/** After the past: live gateways speak of the present only. */
export async function endReplay(administrator: PersonActor, room: SeedRoom): Promise<void> {
  for (const gateway of room.gateways) {
    if (gateway.isReplay) continue
    await updateGateway(administrator, { id: gateway.id, name: gateway.name, mayReplay: false })
  }
}

const dayMs = 86_400_000

/** Checks of every lead and opposite probe at ice, boiling water and a block, in date for `days`. */
export async function seedProbeChecks(
  by: PersonActor,
  room: SeedRoom,
  at: Date,
  days: number,
  random: Random,
): Promise<void> {
  const when = { checkedAt: at.toISOString(), dueAt: new Date(at.getTime() + days * dayMs).toISOString() }
  for (const hearth of room.hearths) {
    for (const role of ['lead', 'opposite'] as const) {
      const probeId = hearth.probeIds[role]
      const offC = random.gaussian() * 0.25
      const ice = { kind: 'ice', measuredTempC: offC + random.gaussian() * 0.05, uncertaintyC: 0.4 } as const
      const boiling = {
        kind: 'boiling',
        measuredTempC: 100.1 + offC,
        stationPressureHpa: 1016,
        uncertaintyC: 0.5,
      } as const
      const block = {
        kind: 'block',
        referenceTempC: 205,
        measuredTempC: 205 + 1.2 * offC,
        uncertaintyC: 0.8,
      } as const
      for (const check of [ice, boiling, block]) await recordProbeCheck(by, { probeId, ...check, ...when })
    }
  }
}

export async function seedWaterCheck(by: PersonActor, at: Date, days: number, random: Random): Promise<void> {
  await recordWaterCheck(by, {
    source: 'Well, filtered (demo)',
    tcaNgPerL: Math.round(Math.abs(random.gaussian()) * 4) / 10,
    freeChlorineMgPerL: 0.02,
    checkedAt: at.toISOString(),
    dueAt: new Date(at.getTime() + days * dayMs).toISOString(),
  })
}
