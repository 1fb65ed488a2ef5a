import { threeDigits } from '@/lib/science/three-digits'
import type { PlotScale } from './plot-scale'
import { roundPx } from '@/components/chart/round-px'

export type PlotBox = { left: number; right: number; top: number; bottom: number }

/** Figures along a plot's foot and left side, with what they are; no box, few lines. */
export function PlotAxes({
  box,
  x,
  y,
  xName,
  yName,
}: {
  box: PlotBox
  x: PlotScale
  y: PlotScale
  xName: string
  yName: string
}) {
  return (
    <>
      {y.ticks.map((tick) => (
        <g key={tick}>
          <path d={`M${box.left} ${roundPx(y.toPx(tick))}H${box.right}`} className="fill-none stroke-line" />
          <text
            x={box.left - 8}
            y={roundPx(y.toPx(tick)) + 4.5}
            textAnchor="end"
            className="fill-soft text-[13px]"
          >
            {threeDigits(tick)}
          </text>
        </g>
      ))}
      {x.ticks.map((tick) => (
        <text
          key={tick}
          x={roundPx(x.toPx(tick))}
          y={box.bottom + 18}
          textAnchor="middle"
          className="fill-soft text-[13px]"
        >
          {threeDigits(tick)}
        </text>
      ))}
      <text x={box.right} y={box.bottom + 36} textAnchor="end" className="fill-soft text-[13px]">
        {xName}
      </text>
      <text x={0} y={12} className="fill-soft text-[13px]">
        {yName}
      </text>
    </>
  )
}
