import { formatPercent } from '@/lib/format'
import { ratioFromLog10 } from '@/lib/science/dose-ratio'

export type StaveGaugeProps = {
  /** Dose now as a fraction of the target (1 is on target); null when it is not known. */
  fraction: number | null
  /** Its k = 2 range, as fractions of the target. */
  range?: { low: number; high: number } | null
  /** The plan's fraction at this moment. */
  planFraction?: number | null
  /** Recipe tolerance in log10 of dose. */
  toleranceLog10: number
  width?: number
  height?: number
}

const TIP = 0.62

/**
 * Dose as a stave seen from its edge: wide at the bilge, filled with toast colour from the left, the target
 * a line across it and the tolerance a paler stretch about that line. Linear in dose from nought to a little
 * over the top of the tolerance.
 */
export function StaveGauge({
  fraction,
  range = null,
  planFraction = null,
  toleranceLog10,
  width = 146,
  height = 48,
}: StaveGaugeProps) {
  const high = ratioFromLog10(toleranceLog10)
  const full = Math.max(1.45, high * 1.08)
  const toX = (part: number) => Math.min(Math.max(part / full, 0), 1) * width
  const clipId = `stave-${width}-${height}`
  const outline = staveOutline(width, height)
  return (
    <svg
      width={width}
      height={height}
      viewBox={`0 0 ${width} ${height}`}
      role="img"
      aria-label={describeDose(fraction, range, planFraction)}
      className="block overflow-visible"
    >
      <clipPath id={clipId}>
        <path d={outline} />
      </clipPath>
      <g clipPath={`url(#${clipId})`}>
        <rect width={width} height={height} className="fill-raised" />
        <rect
          x={toX(1 / high)}
          width={toX(high) - toX(1 / high)}
          height={height}
          className="fill-plan-line opacity-45"
        />
        <rect width={toX(fraction ?? 0)} height={height} className="fill-toast" />
      </g>
      <path d={outline} className="fill-none stroke-edge" strokeWidth="1.25" />
      <line x1={toX(1)} x2={toX(1)} y1="0" y2={height} className="stroke-text" strokeWidth="2.5" />
      {range === null ? null : (
        <path
          d={`M${toX(range.low)} ${height / 2}H${toX(range.high)}M${toX(range.low)} ${height / 2 - 3}v6M${toX(range.high)} ${height / 2 - 3}v6`}
          className="fill-none stroke-text"
          strokeWidth="1.25"
        />
      )}
    </svg>
  )
}

/** Tips at 62 % of the bilge's height, the edges bowed as a barrel's are. */
function staveOutline(width: number, height: number): string {
  const inset = 2
  const top = inset + ((1 - TIP) / 2) * height
  const bottom = height - top
  const bow = 2 * inset - top
  return `M0.6 ${top}Q${width / 2} ${bow} ${width - 0.6} ${top}V${bottom}Q${width / 2} ${height - bow} 0.6 ${bottom}Z`
}

function describeDose(
  fraction: number | null,
  range: { low: number; high: number } | null,
  planFraction: number | null,
): string {
  if (fraction === null) return 'Dose not known'
  const spread = range === null ? '' : `, from ${formatPercent(range.low)} to ${formatPercent(range.high)}`
  const plan = planFraction === null ? '' : `; the plan has ${formatPercent(planFraction)} at this moment`
  return `Dose ${formatPercent(fraction)} of target${spread}${plan}`
}
