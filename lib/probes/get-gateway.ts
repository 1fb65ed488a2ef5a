import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import type { GatewayDetailDto } from '@/lib/probes/schema'
import type { GatewayRow } from '@/lib/probes/to-gateway'
import { gatewaySelect, toGateway } from '@/lib/probes/to-gateway'
import { now } from '@/lib/runtime'

/** One gateway: how it stands, its program's starts, its probes and why it was refused. @throws AppError 'not found' */
export async function getGateway(actor: Actor, input: { id: string }): Promise<GatewayDetailDto> {
  requirePermission(actor, 'room:read')
  const em = await forkEm()
  const [row] = await queryRows<GatewayRow>(em, `${gatewaySelect} where g.id = ?`, [now(), input.id])
  if (row === undefined) throw new AppError('not found', 'There is no such gateway.')
  const [boots, probes, refusedReasons] = await Promise.all([
    readBoots(em, input.id),
    readProbes(em, input.id),
    readReasons(em, input.id),
  ])
  return {
    ...toGateway(row),
    createdAt: new Date(row.created_at).toISOString(),
    boots,
    probes,
    refusedReasons,
  }
}

type BootRow = {
  no: number
  first_seen_at: Date
  last_seen_at: Date
  acked_seq: string
  clock_offset_ms: number
  refused: string
  lost: string
}

async function readBoots(em: EntityManager, gatewayId: string): Promise<GatewayDetailDto['boots']> {
  const rows = await queryRows<BootRow>(
    em,
    `select b.no, b.first_seen_at, b.last_seen_at, b.acked_seq, b.clock_offset_ms,
            (select count(*) from refused_readings r where r.boot_no = b.no) as refused,
            (select coalesce(sum(l.to_seq - l.from_seq + 1), 0) from gateway_losses l where l.boot_no = b.no) as lost
       from gateway_boots b where b.gateway_id = ? order by b.last_seen_at desc, b.no desc limit 20`,
    [gatewayId],
  )
  return rows.map((row) => ({
    number: row.no,
    firstSeenAt: new Date(row.first_seen_at).toISOString(),
    lastSeenAt: new Date(row.last_seen_at).toISOString(),
    ackedSeq: Number(row.acked_seq),
    clockOffsetMs: row.clock_offset_ms,
    refusedCount: Number(row.refused),
    lostCount: Number(row.lost),
  }))
}

type ProbeRow = {
  id: string
  name: string
  channel: number
  usual_role: 'lead' | 'opposite' | 'coals' | 'spare'
  number: number | null
}

async function readProbes(em: EntityManager, gatewayId: string): Promise<GatewayDetailDto['probes']> {
  const rows = await queryRows<ProbeRow>(
    em,
    `select p.id, p.name, p.channel, p.usual_role, h.number from probes p left join hearths h on h.id = p.hearth_id
      where p.gateway_id = ? and p.retired_at is null order by p.channel`,
    [gatewayId],
  )
  return rows.map((row) => ({
    id: row.id,
    name: row.name,
    channel: row.channel,
    usualRole: row.usual_role,
    hearthNumber: row.number,
  }))
}

async function readReasons(
  em: EntityManager,
  gatewayId: string,
): Promise<GatewayDetailDto['refusedReasons']> {
  const rows = await queryRows<{ reason: string; count: string }>(
    em,
    `select r.reason, count(*) as count from refused_readings r join gateway_boots b on b.no = r.boot_no
      where b.gateway_id = ? group by r.reason order by count(*) desc, r.reason limit 20`,
    [gatewayId],
  )
  return rows.map((row) => ({ reason: row.reason, count: Number(row.count) }))
}
