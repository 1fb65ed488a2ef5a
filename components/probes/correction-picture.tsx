import { CorrectionByTemperature, CorrectionByTime } from '@/components/probes/correction-charts'
import type { CorrectionPoint } from '@/components/probes/correction-scale'
import { toShownDifference, toShownTemp, unitName } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { ProbeCheckDto } from '@/lib/probes/schema'
import { toCheckRow } from '@/lib/probes/to-check-row'
import { probeCorrectionAt } from '@/lib/science/probe-correction'

/** The line is drawn over what wood and checks reach, °C. */
const lineFromC = -5
const lineToC = 240

/** A probe's correction by temperature and by time, from all its checks. */
export function CorrectionPicture({
  checks,
  nowMs,
  zone,
  unit,
}: {
  checks: readonly ProbeCheckDto[]
  nowMs: number
  zone: string
  unit: TemperatureUnit
}) {
  if (checks.length === 0) return null
  const points = pointsOf(checks, unit)
  return (
    <div className="grid gap-x-10 gap-y-4 lg:grid-cols-2">
      <CorrectionByTemperature points={points} line={lineOf(checks, nowMs, unit)} unitName={unitName(unit)} />
      <CorrectionByTime points={points} zone={zone} unitName={unitName(unit)} />
    </div>
  )
}

function pointsOf(checks: readonly ProbeCheckDto[], unit: TemperatureUnit): CorrectionPoint[] {
  return checks.map((check) => {
    const newest = Math.max(
      ...checks.filter((one) => one.kind === check.kind).map((one) => Date.parse(one.checkedAt)),
    )
    return {
      kind: check.kind,
      atTemp: toShownTemp(check.measuredTempC, unit),
      correction: toShownDifference(check.correctionC, unit),
      half: toShownDifference(check.uncertaintyC, unit),
      atMs: Date.parse(check.checkedAt),
      isNewest: newest - Date.parse(check.checkedAt) <= 86_400_000,
    }
  })
}

function lineOf(checks: readonly ProbeCheckDto[], nowMs: number, unit: TemperatureUnit) {
  const { correctionC, check } = probeCorrectionAt(checks.map(toCheckRow), nowMs)
  const corners = checks.map((one) => one.measuredTempC)
  const temps = [...new Set([lineFromC, ...corners, lineToC])].sort((a, b) => a - b)
  return temps.map((tempC) => ({
    atTemp: toShownTemp(tempC, unit),
    correction: toShownDifference(correctionC(tempC), unit),
    isInside: check !== null && tempC >= check.lowTempC - 1e-9 && tempC <= check.highTempC + 1e-9,
  }))
}
