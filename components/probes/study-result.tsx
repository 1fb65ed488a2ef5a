import { roundTicks } from '@/components/chart/round-ticks'
import { linearScale } from '@/components/probes/correction-scale'
import { doseShareWords, halfWidthWords, log10Words } from '@/components/probes/half-width-words'
import { Facts } from '@/components/ui/facts'
import { formatCount, formatNumber, formatSigned, toShownDifference, unitName } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { StudyDto, StudyResultDto } from '@/lib/probes/study-schema'

/** Below this many the interval is wide enough to be said. */
const few = 10
const leastPlacements = 5

/** The spread of the placements, what it is worth in dose, and how well that is known. */
export function StudyResult({ study, unit }: { study: StudyDto; unit: TemperatureUnit }) {
  const { result } = study
  const counted = study.placements.filter((one) => one.struck === null)
  if (result === null) {
    return <p className="text-large">{notYetWords(counted.length, study.state)}</p>
  }
  return (
    <div className="grid gap-x-12 gap-y-4 lg:grid-cols-2">
      <div>
        <p className="text-title font-[640]">
          {halfWidthWords(result.halfWidthC, unit)} <span className="font-[380]">one placement, k = 2</span>
        </p>
        <div className="mt-2">
          <Facts isRuled facts={factsOf(result, unit)} />
        </div>
      </div>
      <DotRow differencesC={counted.map((one) => one.differenceC)} result={result} unit={unit} />
    </div>
  )
}

function notYetWords(count: number, state: StudyDto['state']): string {
  if (state === 'abandoned')
    return `${formatCount(count, 'placement')}; the study was abandoned and says nothing.`
  if (count < leastPlacements) {
    return `${formatCount(count, 'placement')} so far. It takes ${leastPlacements} to say anything, and ${few} to say it well.`
  }
  return 'All differences are alike, which placing a probe never gives. Read them more finely.'
}

function factsOf(result: StudyResultDto, unit: TemperatureUnit) {
  const range = (low: number, high: number, decimals: number) =>
    `${formatNumber(low, decimals)} to ${formatNumber(high, decimals)}`
  return [
    { name: 'Placements that count', value: `${result.n}${result.n < few ? ': few' : ''}` },
    {
      name: 'In log10 of dose',
      value: `${log10Words(result.halfWidthLog10)}, with 95 % between ${range(result.halfWidthLowLog10, result.halfWidthHighLog10, 3)}`,
    },
    { name: 'Which is', value: doseShareWords(result.halfWidthLog10) },
    {
      name: 'Half-width between',
      value: `${range(toShownDifference(result.halfWidthLowC, unit), toShownDifference(result.halfWidthHighC, unit), 1)} ${unitName(unit)} (95 %)`,
    },
    {
      name: 'The two places apart',
      value: `${formatSigned(toShownDifference(result.meanC, unit), 1)} ${unitName(unit)} on the mean; it does not count`,
    },
  ]
}

const size = { width: 460, height: 110, left: 16, right: 16 } as const

/** Each difference as a dot in a row; the half-width about the mean stands grey behind them. */
function DotRow({
  differencesC,
  result,
  unit,
}: {
  differencesC: readonly number[]
  result: StudyResultDto
  unit: TemperatureUnit
}) {
  const shown = (differenceC: number) => toShownDifference(differenceC, unit)
  const low = Math.min(result.meanC - result.halfWidthC, ...differencesC)
  const high = Math.max(result.meanC + result.halfWidthC, ...differencesC)
  const domain = [shown(low), shown(high)] as const
  const x = linearScale(domain, [size.left, size.width - size.right])
  const bandX = x(shown(result.meanC - result.halfWidthC))
  const bandEndX = x(shown(result.meanC + result.halfWidthC))
  const ticks = roundTicks(...domain, 5)
  return (
    <figure className="min-w-0">
      <figcaption className="text-small text-soft">
        Placed minus fixed, {unitName(unit)}; grey: one placement, k = 2
      </figcaption>
      <svg
        viewBox={`0 0 ${size.width} ${size.height}`}
        className="block w-full max-w-[34rem]"
        role="img"
        aria-label="The differences in a row; their figures stand in the table of placements"
      >
        <rect x={bandX} y={10} width={bandEndX - bandX} height={56} className="fill-plan" />
        <line
          x1={x(shown(result.meanC))}
          x2={x(shown(result.meanC))}
          y1={10}
          y2={66}
          className="stroke-edge"
        />
        {differencesC.map((differenceC, index) => (
          <circle
            key={index}
            cx={x(shown(differenceC))}
            cy={38 + ((index % 5) - 2) * 9}
            r={4}
            className="fill-text"
          />
        ))}
        <line x1={size.left} x2={size.width - size.right} y1={76} y2={76} className="stroke-line" />
        {ticks.map((tick) => (
          <text key={tick} x={x(tick)} y={94} textAnchor="middle" className="fill-soft text-[13px]">
            {formatSigned(tick, Number.isInteger(tick) ? 0 : 1)}
          </text>
        ))}
      </svg>
    </figure>
  )
}
