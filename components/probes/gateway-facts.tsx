import { Facts } from '@/components/ui/facts'
import { Time } from '@/components/ui/time'
import { formatAge, formatCount, formatNumber } from '@/lib/format'
import type { GatewayDetailDto } from '@/lib/probes/schema'

/** What a gateway last said of itself, and how its clock stands. */
export function GatewayFacts({
  gateway,
  zone,
  nowMs,
}: {
  gateway: GatewayDetailDto
  zone: string
  nowMs: number
}) {
  const { status, lastSeenAt, clockOffsetMs } = gateway
  const facts = [
    {
      name: 'Last heard of',
      value:
        lastSeenAt === null ? (
          'never'
        ) : (
          <>
            {formatAge((nowMs - Date.parse(lastSeenAt)) / 1000)} ago, <Time at={lastSeenAt} zone={zone} />
          </>
        ),
    },
    { name: 'Its clock', value: clockWords(clockOffsetMs) },
    { name: 'Waits on its disk', value: spoolWords(gateway, nowMs) },
    { name: 'Its program', value: programWords(status) },
    { name: 'Refused in all', value: formatCount(gateway.refusedCount, 'reading') },
    { name: 'Declared lost in all', value: formatCount(gateway.lostCount, 'reading') },
    { name: 'Past instants', value: gateway.mayReplay ? 'may send them' : 'refused after 48 h' },
    { name: 'Registered', value: <Time at={gateway.createdAt} zone={zone} style="date" /> },
  ]
  return <Facts isRuled facts={facts} />
}

function clockWords(offsetMs: number | null): string {
  if (offsetMs === null) return 'not known yet'
  const offsetS = offsetMs / 1000
  if (Math.abs(offsetS) < 0.05) return 'with ours'
  const by = `${formatNumber(Math.abs(offsetS), 1)} s ${offsetS > 0 ? 'behind' : 'ahead of'} ours`
  return `${by}, put right here`
}

function spoolWords({ status }: GatewayDetailDto, nowMs: number): string {
  if (status === null) return 'not told: its program says nothing of it'
  const { spooledReadings, spooledBytes, oldestUnsentAt } = status
  if (spooledReadings === 0) return 'nothing'
  const oldest =
    oldestUnsentAt === null
      ? ''
      : `, the oldest from ${formatAge((nowMs - Date.parse(oldestUnsentAt)) / 1000)} ago`
  return `${formatCount(spooledReadings, 'reading')}, ${formatNumber(spooledBytes / 1024, 0)} KiB${oldest}`
}

function programWords(status: GatewayDetailDto['status']): string {
  if (status === null) return 'not told'
  return `version ${status.programVersion}, running for ${formatAge(status.uptimeS)}`
}
