import { classNames } from '@/components/ui/class-names'
import { createSvgSink, traceLine } from './line-path'
import { buildPairModel, HEAD_FRESH_S, lastReading } from './pair-model'
import type { ModelWood, PairModel } from './pair-model'
import type { PairProps } from './pair-types'
import { describePair } from './pair-words'
import { contourWood } from './wood-picture'
import { roundPx } from './round-px'
import { woodColour } from './wood-scale'

export type SmallPairProps = PairProps & {
  /** The drawing's own size, px; it scales to its place. */
  widthPx?: number
  heightPx?: number
  /** The wood's share of the height. */
  woodShare?: number
}

const LEVELS = 24
const GAP_PX = 10

/** The pair for list rows and the room: no words, no axes, drawn as SVG wherever it is rendered. */
export function SmallPair({ widthPx = 240, heightPx = 96, woodShare = 0.3, ...props }: SmallPairProps) {
  const model = buildPairModel(props)
  const woodPx = model.wood === null ? 0 : (heightPx - GAP_PX) * woodShare
  const firePx = heightPx - woodPx - (model.wood === null ? 0 : GAP_PX)
  const toX = (timeS: number) => 1 + (timeS / model.xMaxS) * (widthPx - 2)
  const toY = (tempC: number) => firePx - ((tempC - model.lowC) / (model.highC - model.lowC)) * firePx
  return (
    <svg
      data-pair="small"
      viewBox={`0 0 ${widthPx} ${heightPx}`}
      role="img"
      aria-label={describePair(model)}
      className={classNames('block', props.className ?? 'h-auto w-full')}
    >
      <path d={bandPath(model, toX, toY)} className="fill-plan" />
      {model.limitC === null ? null : (
        <path
          d={`M1 ${toY(model.limitC)}H${widthPx}`}
          className="fill-none stroke-red"
          strokeDasharray="2 3"
        />
      )}
      {model.second === null ? null : (
        <path d={linePath(model.second, toX, toY)} className="fill-none stroke-mute" strokeWidth="0.9" />
      )}
      <path
        d={linePath(model.lead, toX, toY)}
        className="fill-none stroke-text"
        strokeWidth="2"
        strokeLinejoin="round"
      />
      <Head model={model} toX={toX} toY={toY} />
      {model.wood === null ? null : (
        <SmallWood
          wood={model.wood}
          depthMaxMm={model.depthMaxMm}
          toX={toX}
          top={heightPx - woodPx}
          height={woodPx}
          widthPx={widthPx}
        />
      )}
    </svg>
  )
}

type ToPx = (value: number) => number

function bandPath(model: PairModel, toX: ToPx, toY: ToPx): string {
  if (model.planBand.length < 2) return ''
  const upper = model.planBand.map((point) => `${roundPx(toX(point.timeS))} ${roundPx(toY(point.highC))}`)
  const lower = model.planBand
    .map((point) => `${roundPx(toX(point.timeS))} ${roundPx(toY(point.lowC))}`)
    .reverse()
  return `M${[...upper, ...lower].join('L')}Z`
}

function linePath(line: { times: Float64Array; temps: Float64Array }, toX: ToPx, toY: ToPx): string {
  const sink = createSvgSink()
  traceLine(sink, line.times, line.temps, toX, toY, 2)
  return sink.data()
}

function Head({ model, toX, toY }: { model: PairModel; toX: ToPx; toY: ToPx }) {
  const head = lastReading(model.lead)
  if (model.nowS === null || head === null || model.nowS - head.timeS > HEAD_FRESH_S) return null
  return <circle cx={roundPx(toX(head.timeS))} cy={roundPx(toY(head.tempC))} r="4" className="fill-text" />
}

function SmallWood({
  wood,
  depthMaxMm,
  toX,
  top,
  height,
  widthPx,
}: {
  wood: ModelWood
  depthMaxMm: number
  toX: ToPx
  top: number
  height: number
  widthPx: number
}) {
  const thin = thinWood(wood, Math.max(Math.round(widthPx / 6), 12))
  const toY = (depthMm: number) => top + (Math.min(depthMm, depthMaxMm) / depthMaxMm) * height
  const start = roundPx(toX(thin.times[0] ?? 0))
  const end = roundPx(toX(thin.times.at(-1) ?? 0))
  return (
    <>
      <rect x="1" y={top} width={widthPx - 2} height={height} className="fill-raised" />
      {end > start ? (
        <rect x={start} y={top} width={end - start} height={height} fill={woodColour(0)} />
      ) : null}
      {contourWood(thin, LEVELS, woodColour).map((contour) => (
        <path
          key={contour.level}
          d={contourPath(contour.depthsMm, thin.times, toX, toY, top)}
          fill={contour.colour}
        />
      ))}
    </>
  )
}

/** From the first column that has depth to the last, closed along the face. */
function contourPath(
  depthsMm: readonly number[],
  times: Float64Array,
  toX: ToPx,
  toY: ToPx,
  top: number,
): string {
  const first = Math.max(depthsMm.findIndex((depth) => depth > 0) - 1, 0)
  const points = depthsMm
    .slice(first)
    .map((depth, i) => `${roundPx(toX(times[first + i] ?? 0))} ${roundPx(toY(depth))}`)
  return `M${points.join('L')}V${roundPx(top)}H${roundPx(toX(times[first] ?? 0))}Z`
}

/** Every n-th column and always the last: a small drawing needs no more. */
function thinWood(wood: ModelWood, columns: number): ModelWood {
  const count = wood.times.length
  if (count <= columns) return wood
  const rows = wood.depthsMm.length
  const kept = Array.from({ length: columns }, (_, i) => Math.round((i * (count - 1)) / (columns - 1)))
  const log10Dose = new Float32Array(columns * rows)
  kept.forEach((from, to) => {
    for (let row = 0; row < rows; row += 1)
      log10Dose[to * rows + row] = wood.log10Dose[from * rows + row] ?? -Infinity
  })
  return { ...wood, log10Dose, times: Float64Array.from(kept, (from) => wood.times[from] ?? 0) }
}
