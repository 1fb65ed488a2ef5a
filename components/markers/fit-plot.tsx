import type { FitPicture } from '@/lib/markers/schema'
import { predictors } from '@/lib/science/marker-families'
import { PlotAxes } from './plot-axes'
import { roundPx } from '@/components/chart/round-px'
import { linearScale, logScale } from './plot-scale'

const width = 640
const height = 330
const box = { left: 46, right: 520, top: 28, bottom: 286 }

/** Results with the fitted curve and the interval in which further results would lie; below a limit as a stem. */
export function FitPlot({ picture, name, unit }: { picture: FitPicture; name: string; unit: string }) {
  return picture.curve.length === 0 ? (
    <AgreementPlot picture={picture} name={name} unit={unit} />
  ) : (
    <CurvePlot picture={picture} name={name} unit={unit} />
  )
}

function CurvePlot({ picture, name, unit }: { picture: FitPicture; name: string; unit: string }) {
  const { fit, results, curve } = picture
  const [range] = fit.ranges
  if (range === undefined) return null
  const predictor = predictors[range.key]
  const doses = results.map((result) => result[range.key] ?? 0)
  const x =
    fit.family === 'line in log10 dose'
      ? logScale(doses, box.left, box.right)
      : linearScale(doses, box.left, box.right)
  const heights = [...results.map((result) => result.value), ...curve.map((point) => point.high)]
  const y = linearScale([...heights, 0], box.bottom, box.top, { from: 0 })
  const point = (at: number, value: number) => `${roundPx(x.toPx(at))} ${roundPx(y.toPx(Math.max(0, value)))}`
  const upper = curve.map(({ x: at, high }) => point(at, high))
  const lower = curve.map(({ x: at, low }) => point(at, low)).reverse()
  const last = curve.at(-1)
  return (
    <svg
      viewBox={`0 0 ${width} ${height}`}
      className="block h-auto w-full max-w-[48rem]"
      role="img"
      aria-label={`${name} against ${predictor.name}: ${fit.count} results, ${fit.belowLimitCount} of them below their limit, with the fitted curve and its 95 % interval. The results stand in the table below.`}
    >
      <path d={`M${[...upper, ...lower].join('L')}Z`} className="fill-plan" />
      <PlotAxes
        box={box}
        x={x}
        y={y}
        xName={`${predictor.name}, ${predictor.unit}`}
        yName={`${name}, ${unit}`}
      />
      <path
        d={`M${curve.map(({ x: at, value }) => point(at, value)).join('L')}`}
        className="fill-none stroke-text"
        strokeWidth="2"
      />
      {results.map((result, i) => (
        <Mark
          key={result.line}
          x={roundPx(x.toPx(doses[i] ?? 0))}
          y={roundPx(y.toPx(result.value))}
          footY={box.bottom}
          isBelowLimit={result.isBelowLimit}
        />
      ))}
      {last === undefined ? null : (
        <>
          <text x={box.right + 10} y={roundPx(y.toPx(last.value)) + 4.5} className="fill-text text-[13px]">
            the fit
          </text>
          <text
            x={box.right + 10}
            y={Math.max(box.top, roundPx(y.toPx(last.high)) + 4.5)}
            className="fill-soft text-[13px]"
          >
            19 of 20 further
          </text>
        </>
      )}
    </svg>
  )
}

/** For two predictors: what was measured against what was fitted; on the line both agree. */
function AgreementPlot({ picture, name, unit }: { picture: FitPicture; name: string; unit: string }) {
  const { fit, results } = picture
  const fitted = fit.residuals.map((one) => one.fitted)
  const all = [...fitted, ...results.map((result) => result.value)]
  const x = linearScale(all, box.left, box.right)
  const y = linearScale(all, box.bottom, box.top)
  const lowest = Math.min(...all)
  const highest = Math.max(...all)
  return (
    <svg
      viewBox={`0 0 ${width} ${height}`}
      className="block h-auto w-full max-w-[48rem]"
      role="img"
      aria-label={`${name}: ${fit.count} results against what the plane gives for them. The results stand in the table below.`}
    >
      <PlotAxes box={box} x={x} y={y} xName={`by the fit, ${unit}`} yName={`${name} measured, ${unit}`} />
      <path
        d={`M${roundPx(x.toPx(lowest))} ${roundPx(y.toPx(lowest))}L${roundPx(x.toPx(highest))} ${roundPx(y.toPx(highest))}`}
        className="fill-none stroke-plan-line"
        strokeWidth="1.5"
      />
      <text x={box.right + 10} y={roundPx(y.toPx(highest)) + 4.5} className="fill-soft text-[13px]">
        both agree
      </text>
      {results.map((result, i) => (
        <Mark
          key={result.line}
          x={roundPx(x.toPx(fitted[i] ?? 0))}
          y={roundPx(y.toPx(result.value))}
          footY={box.bottom}
          isBelowLimit={result.isBelowLimit}
        />
      ))}
    </svg>
  )
}

/** A dot for a measured result; for one below its limit a bar at the limit and a stem over all it may be. */
export function Mark({
  x,
  y,
  footY,
  isBelowLimit,
}: {
  x: number
  y: number
  footY: number
  isBelowLimit: boolean
}) {
  if (!isBelowLimit) return <circle cx={x} cy={y} r="4" className="fill-text" />
  return (
    <path d={`M${x - 5} ${y}h10M${x} ${y}V${footY}`} className="fill-none stroke-text" strokeWidth="1.5" />
  )
}
