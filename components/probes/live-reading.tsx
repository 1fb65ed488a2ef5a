import { settlingFigures, settlingWords } from '@/components/probes/settling-words'
import { tracePath } from '@/components/probes/trace-path'
import type { RecentReadings } from '@/components/probes/use-recent-readings'
import { classNames } from '@/components/ui/class-names'
import { formatNumber, toShownTemp, unitName } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { staleAfterS } from '@/lib/science/stability'
import type { SettlingRule } from '@/lib/science/stability'

/** What a probe says now, large, the last two and a half minutes small, and whether it has settled. */
export function LiveReading({
  name,
  live,
  rule,
  unit,
}: {
  name: string
  live: RecentReadings
  rule: SettlingRule
  unit: TemperatureUnit
}) {
  const { readings, settling, isCut } = live
  if (readings === null || settling === null) {
    return (
      <p className="text-soft" role="status">
        {isCut ? 'The server does not answer. Trying again each second.' : `Asking what ${name} says.`}
      </p>
    )
  }
  const newest = readings.tempC.at(-1) ?? null
  const ageS = (readings.nowMs - (readings.atMs.at(-1) ?? -Infinity)) / 1000
  const isNow = !isCut && ageS <= staleAfterS && newest !== null
  const said = settlingWords(settling, readings, rule)
  return (
    <div>
      <p className="text-soft">{name} reads, uncorrected</p>
      <p className={classNames('text-[62px] leading-none font-[640]', !isNow && 'text-amber')}>
        {isNow ? formatNumber(toShownTemp(newest, unit), 1) : 'NO READING'}
        {isNow ? <span className="text-title font-[380]"> {unitName(unit)}</span> : null}
      </p>
      <Trace readings={readings} windowS={rule.windowS} />
      <p
        role="status"
        className={classNames('text-large', said.isGood && !isCut ? 'font-[640]' : 'text-amber')}
      >
        {isCut ? 'The server does not answer. Trying again each second.' : said.words}
      </p>
      <p className="min-h-[3em] text-soft">{settlingFigures(settling, rule, unit)}</p>
    </div>
  )
}

const trace = { width: 460, height: 90, seconds: 150 } as const

/** The readings of the last minutes; what was no reading is a gap. The part that is judged stands on the plan's grey. */
function Trace({
  readings,
  windowS,
}: {
  readings: NonNullable<RecentReadings['readings']>
  windowS: number
}) {
  const { nowMs, atMs, tempC } = readings
  const known = tempC.filter((one): one is number => one !== null)
  if (known.length < 2) return <div style={{ height: trace.height }} />
  const [low, high] = [Math.min(...known), Math.max(...known)]
  const spanC = Math.max(high - low, 0.4)
  const middleC = (high + low) / 2
  const x = (at: number) => trace.width * (1 - (nowMs - at) / 1000 / trace.seconds)
  const y = (temp: number) => trace.height * (0.5 - (0.9 * (temp - middleC)) / spanC)
  const path = tracePath(
    atMs.map((at, i) => {
      const temp = tempC[i] ?? null
      return temp === null ? null : { x: x(at), y: y(temp) }
    }),
  )
  const windowX = x(nowMs - windowS * 1000)
  return (
    <svg
      viewBox={`0 0 ${trace.width} ${trace.height}`}
      className="my-2 block w-full max-w-[34rem]"
      aria-hidden="true"
    >
      <rect x={windowX} y={0} width={trace.width - windowX} height={trace.height} className="fill-plan" />
      <path d={path} fill="none" className="stroke-text" strokeWidth={1.6} />
    </svg>
  )
}
