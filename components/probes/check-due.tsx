import { formatInstant } from '@/lib/format'
import type { ProbeDto } from '@/lib/probes/schema'

/** When a probe's earliest check is due; amber where a firing would ask for a signature. */
export function CheckDue({
  probe,
  zone,
}: {
  probe: Pick<ProbeDto, 'checkDueAt' | 'checkState' | 'usualRole' | 'leadFaults'>
  zone: string
}) {
  const { checkDueAt, checkState } = probe
  if (checkState === 'not asked') return <span className="text-mute">not asked</span>
  if (checkState === 'never' || checkDueAt === null) return <Amber>never checked</Amber>
  const date = formatInstant(checkDueAt, zone, 'date')
  if (checkState === 'overdue') return <Amber>overdue since {date}</Amber>
  const isUnfit = probe.usualRole === 'lead' && probe.leadFaults.length > 0
  return (
    <>
      {checkState === 'due soon' ? <Amber>due soon, {date}</Amber> : date}
      {isUnfit ? (
        <span className="block">
          <Amber>not checked hot</Amber>
        </span>
      ) : null}
    </>
  )
}

function Amber({ children }: { children: React.ReactNode }) {
  return <span className="font-[560] text-amber">{children}</span>
}
