'use client'

import { useRef } from 'react'
import type { KeyboardEvent, PointerEvent } from 'react'
import { formatClock, formatTemp } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { SNAP_C, SNAP_S, snapDrag, snapPoint } from './drag-snap'
import type { HandleFrame } from './drag-snap'
import type { DraggedPoint, PairSeries, PairStage } from './pair-types'

export type { HandleFrame } from './drag-snap'

type DragHandlesProps = {
  frame: HandleFrame
  lead: PairSeries
  stages: readonly PairStage[]
  unit: TemperatureUnit
  onDragPoint: (point: DraggedPoint) => void
  onDragEnd?: (point: DraggedPoint) => void
}

/**
 * The plan's corners as circles in water. Dragged by pointer, or moved by the arrow keys: up and down 1 °C,
 * left and right half a minute. The stage table says the same in figures.
 */
export function DragHandles({ frame, lead, stages, unit, onDragPoint, onDragEnd }: DragHandlesProps) {
  const area = useRef<SVGSVGElement>(null)
  const dragged = useRef<DraggedPoint | null>(null)

  function follow(event: PointerEvent<SVGCircleElement>, pointIndex: number) {
    if (!event.currentTarget.hasPointerCapture(event.pointerId) || area.current === null) return
    const box = area.current.getBoundingClientRect()
    const at = { xPx: event.clientX - box.left - frame.left, yPx: event.clientY - box.top - frame.top }
    const point = snapDrag(frame, pointIndex, lead.timeS, at)
    if (dragged.current?.timeS === point.timeS && dragged.current.tempC === point.tempC) return
    dragged.current = point
    onDragPoint(point)
  }

  function letGo() {
    if (dragged.current !== null) onDragEnd?.(dragged.current)
    dragged.current = null
  }

  function moveByKey(event: KeyboardEvent, pointIndex: number) {
    const step = keySteps[event.key]
    if (step === undefined) return
    event.preventDefault()
    const timeS = (lead.timeS[pointIndex] ?? 0) + step.timeS
    const point = snapPoint(pointIndex, lead.timeS, timeS, (lead.tempC[pointIndex] ?? 0) + step.tempC)
    onDragPoint(point)
    onDragEnd?.(point)
  }

  return (
    <svg ref={area} className="pointer-events-none absolute inset-0 size-full overflow-visible">
      {Array.from(lead.timeS, (timeS, i) => {
        const tempC = lead.tempC[i] ?? null
        if (tempC === null) return null
        return (
          <circle
            key={i}
            cx={frame.left + (timeS / frame.xMaxS) * frame.width}
            cy={frame.top + ((frame.highC - tempC) / (frame.highC - frame.lowC)) * frame.height}
            r="6.5"
            strokeWidth="2"
            tabIndex={0}
            role="slider"
            aria-label={i === 0 ? 'Start of the plan' : `End of ${stages[i - 1]?.name ?? `stage ${i}`}`}
            aria-valuenow={tempC}
            aria-valuetext={`${formatTemp(tempC, unit)} at ${formatClock(timeS)}`}
            className="pointer-events-auto cursor-grab touch-none fill-ground stroke-water active:cursor-grabbing"
            onPointerDown={(event) => event.currentTarget.setPointerCapture(event.pointerId)}
            onPointerMove={(event) => follow(event, i)}
            onPointerUp={letGo}
            onPointerCancel={letGo}
            onKeyDown={(event) => moveByKey(event, i)}
          />
        )
      })}
    </svg>
  )
}

const keySteps: Readonly<Record<string, { timeS: number; tempC: number }>> = {
  ArrowUp: { timeS: 0, tempC: SNAP_C },
  ArrowDown: { timeS: 0, tempC: -SNAP_C },
  ArrowLeft: { timeS: -SNAP_S, tempC: 0 },
  ArrowRight: { timeS: SNAP_S, tempC: 0 },
}
