import type { FitPicture } from '@/lib/markers/schema'
import { PlotAxes } from './plot-axes'
import { roundPx } from '@/components/chart/round-px'
import { linearScale } from './plot-scale'

const width = 400
const height = 330
const box = { left: 46, right: 392, top: 28, bottom: 286 }

/** What each measured result is off the fit, against the fit: a pattern here says that the shape is wrong. */
export function ResidualPlot({ picture, unit }: { picture: FitPicture; unit: string }) {
  const measured = picture.fit.residuals.flatMap(({ fitted, residual }) =>
    residual === null ? [] : [{ fitted, residual }],
  )
  const furthest = Math.max(...measured.map(({ residual }) => Math.abs(residual)), picture.fit.residualSd)
  const x = linearScale(
    measured.map(({ fitted }) => fitted),
    box.left,
    box.right,
    { most: 4 },
  )
  const y = linearScale([-furthest, furthest], box.bottom, box.top, { most: 4 })
  const zeroY = roundPx(y.toPx(0))
  return (
    <svg
      viewBox={`0 0 ${width} ${height}`}
      className="block h-auto w-full max-w-[30rem]"
      role="img"
      aria-label={`Residuals of ${measured.length} measured results against the fitted value, at most ${furthest.toPrecision(2)} ${unit}.`}
    >
      <PlotAxes box={box} x={x} y={y} xName={`by the fit, ${unit}`} yName={`off the fit, ${unit}`} />
      <path
        d={`M${box.left} ${zeroY}H${box.right}`}
        className="fill-none stroke-plan-line"
        strokeWidth="1.5"
      />
      {measured.map(({ fitted, residual }) => (
        <g key={`${fitted} ${residual}`}>
          <path
            d={`M${roundPx(x.toPx(fitted))} ${zeroY}V${roundPx(y.toPx(residual))}`}
            className="fill-none stroke-mute"
          />
          <circle cx={roundPx(x.toPx(fitted))} cy={roundPx(y.toPx(residual))} r="3.5" className="fill-text" />
        </g>
      ))}
    </svg>
  )
}
