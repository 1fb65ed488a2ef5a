import type { CheckKind } from '@/components/probes/check-draft'
import { formatInstant, formatTemp } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { checkPoints } from '@/lib/probes/check-points'
import type { ProbeDetailDto } from '@/lib/probes/schema'
import { LEAD_CHECK_SPAN_C } from '@/lib/science/probe-correction'

/** The three points, each with how it stands; a large target each, for gloves. */
export function CheckPointStep({
  probe,
  nowMs,
  zone,
  unit,
  onChoose,
}: {
  probe: ProbeDetailDto
  nowMs: number
  zone: string
  unit: TemperatureUnit
  onChoose: (kind: CheckKind) => void
}) {
  const { low, high } = LEAD_CHECK_SPAN_C
  return (
    <>
      <h2 className="text-large">Against what?</h2>
      <p className="mt-1 text-soft">
        {probe.usualRole === 'lead'
          ? `A lead probe needs all three; the block stands at ${formatTemp(low, unit)} to ${formatTemp(high, unit)}, where the dose is made.`
          : 'Ice and boiling water tell most; a block near the toast’s heat tells what matters.'}
      </p>
      <ul className="mt-4 grid gap-3">
        {checkPoints.map((point) => (
          <li key={point.kind}>
            <button
              type="button"
              onClick={() => onChoose(point.kind)}
              className="control flex min-h-[85px] w-full items-center justify-between gap-6 px-5 text-left hover:bg-wash"
            >
              <span className="text-large font-[640]">{point.title}</span>
              <span className="text-right">
                <Standing probe={probe} kind={point.kind} nowMs={nowMs} zone={zone} />
              </span>
            </button>
          </li>
        ))}
      </ul>
    </>
  )
}

function Standing({
  probe,
  kind,
  nowMs,
  zone,
}: {
  probe: ProbeDetailDto
  kind: CheckKind
  nowMs: number
  zone: string
}) {
  const newest = probe.checks.find((check) => check.kind === kind)
  if (newest === undefined) return <span className="text-amber">never checked</span>
  const due = formatInstant(newest.dueAt, zone, 'date')
  const isOver = Date.parse(newest.dueAt) <= nowMs
  return (
    <>
      <span className="block text-soft">checked {formatInstant(newest.checkedAt, zone, 'date')}</span>
      <span className={isOver ? 'text-amber' : ''}>{isOver ? `overdue since ${due}` : `due ${due}`}</span>
    </>
  )
}
