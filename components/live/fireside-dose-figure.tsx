import { StaveGauge } from '@/components/ui/stave-gauge'
import { classNames } from '@/components/ui/class-names'
import { formatInstant, formatNumber } from '@/lib/format'
import type { FiringState } from '@/lib/live/events'
import { roundPercent } from './fireside-figures'
import { firesideType } from './fireside-type'

export type DoseFigureProps = {
  dose: FiringState['dose'] | null
  forecast: FiringState['forecast']
  /** In the forecast's place when there is none. */
  noForecastWords: string
  /** The advice stands under the picture, to be answered. */
  isAdviceBelow: boolean
  /** How often the forecast was right lately; null while too few can be told. */
  record: string | null
  toleranceLog10: number
  isLive: boolean
  nowMs: number
  zone: string
}

/** Dose against its target and against the plan at this moment, how good the figure is, and what comes of it. */
export function DoseFigure(props: DoseFigureProps) {
  const { dose, forecast, noForecastWords, toleranceLog10, isLive, nowMs, zone } = props
  return (
    <div className="min-w-0 px-6 py-3">
      <p className={classNames(firesideType.label.className, 'flex justify-between gap-3 text-soft')}>
        <span>{doseLabel(dose)}</span>
        <span className="whitespace-nowrap">
          {isLive ? 'live ' : ''}
          {formatInstant(nowMs, zone, 'time')}
        </span>
      </p>
      <div className="mt-1 flex items-center justify-between gap-2">
        <p
          data-figure="dose"
          className={classNames(firesideType.action.className, '-tracking-[0.02em] whitespace-nowrap')}
        >
          {dose === null ? '–' : roundPercent(dose.minutes / dose.targetMinutes)}
        </p>
        <p className={classNames(firesideType.label.className, 'whitespace-nowrap text-soft')}>
          {dose === null ? '' : `plan ${roundPercent(dose.planMinutesNow / dose.targetMinutes)}`}
        </p>
        <Gauge dose={dose} toleranceLog10={toleranceLog10} />
      </div>
      <p className={classNames(firesideType.text.className, 'mt-2 line-clamp-3')}>
        {forecast === null ? noForecastWords : forecastWords(forecast, props.isAdviceBelow)}
      </p>
      {forecast === null || props.record === null ? null : (
        <p className={classNames(firesideType.small.className, 'mt-1 truncate text-soft')}>{props.record}</p>
      )}
    </div>
  )
}

function forecastWords(forecast: NonNullable<DoseFigureProps['forecast']>, isAdviceBelow: boolean): string {
  return isAdviceBelow ? forecast.sentence : `${forecast.sentence} ${forecast.advice}`
}

function doseLabel(dose: FiringState['dose'] | null): string {
  if (dose === null) return 'Dose'
  if (dose.isIncomplete) return 'Dose, incomplete: a gap is too long'
  return `Dose, good to ±${formatNumber(Math.ceil(dose.goodToPercent))}\u00a0%`
}

/** Narrower beside three figures. */
const GAUGE_PX = 116
const GAUGE_NARROW_PX = 76
const THREE_FIGURES_FROM = 0.995

function Gauge({ dose, toleranceLog10 }: Pick<DoseFigureProps, 'dose' | 'toleranceLog10'>) {
  if (dose === null) return <StaveGauge fraction={null} toleranceLog10={toleranceLog10} width={GAUGE_PX} />
  const fraction = dose.minutes / dose.targetMinutes
  const factor = 1 + dose.goodToPercent / 100
  return (
    <StaveGauge
      fraction={fraction}
      range={{ low: fraction / factor, high: fraction * factor }}
      planFraction={dose.planMinutesNow / dose.targetMinutes}
      toleranceLog10={toleranceLog10}
      width={fraction < THREE_FIGURES_FROM ? GAUGE_PX : GAUGE_NARROW_PX}
    />
  )
}
