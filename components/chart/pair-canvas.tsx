'use client'

import { useCallback, useMemo, useRef, useState } from 'react'
import type { PointerEvent, Ref } from 'react'
import { classNames } from '@/components/ui/class-names'
import { DragHandles } from './drag-handles'
import type { HandleFrame } from './drag-handles'
import type { PairLayout } from './pair-layout'
import { buildPairModel } from './pair-model'
import type { PairModel } from './pair-model'
import { PairTable } from './pair-table'
import type { DraggedPoint, PairHandle, PairProps } from './pair-types'
import { describePair } from './pair-words'
import { usePairView } from './use-pair-view'

export type PairCanvasProps = PairProps & {
  ref?: Ref<PairHandle>
  /** Makes the lead's points draggable: called while dragging and by the arrow keys, already snapped. */
  onDragPoint?: (point: DraggedPoint) => void
  /** Once, when a drag or a key has ended, so that one movement is one step of undo. */
  onDragEnd?: (point: DraggedPoint) => void
}

const heights = { large: 'h-[700px]', medium: 'h-[300px]', small: '' } as const

/** The large and medium pair. */
export function PairCanvas(props: PairCanvasProps) {
  const { ref, onDragPoint, onDragEnd } = props
  const root = useRef<HTMLDivElement>(null)
  const [frame, setFrame] = useState<HandleFrame | null>(null)
  const isDraggable = onDragPoint !== undefined
  const onLayout = useCallback(
    (layout: PairLayout, model: PairModel) => {
      if (isDraggable) setFrame((now) => keepSame(now, toHandleFrame(layout, model)))
    },
    [isDraggable],
  )
  const view = usePairView(root, props, ref, onLayout)
  const model = useMemo(() => buildPairModel(props), [props])
  const point = (event: PointerEvent<HTMLDivElement>) => {
    if (event.pointerType !== 'mouse' || model.nowS !== null) return
    view.current?.point(event.clientX - event.currentTarget.getBoundingClientRect().left)
  }

  return (
    <div
      data-pair={props.size}
      className={classNames('relative min-w-0', props.className ?? heights[props.size])}
      onPointerMove={point}
      onPointerLeave={() => view.current?.point(null)}
    >
      <div
        ref={root}
        role="img"
        aria-label={describePair(model)}
        className="absolute inset-0 overflow-hidden contain-strict"
      />
      {onDragPoint === undefined || frame === null ? null : (
        <DragHandles
          frame={frame}
          lead={props.lead}
          stages={props.stages}
          unit={props.unit}
          onDragPoint={onDragPoint}
          onDragEnd={onDragEnd}
        />
      )}
      <PairTable model={model} />
    </div>
  )
}

function keepSame(before: HandleFrame | null, next: HandleFrame): HandleFrame {
  const isSame =
    before !== null &&
    before.left === next.left &&
    before.top === next.top &&
    before.width === next.width &&
    before.height === next.height &&
    before.xMaxS === next.xMaxS &&
    before.lowC === next.lowC &&
    before.highC === next.highC
  return isSame ? before : next
}

function toHandleFrame(layout: PairLayout, model: PairModel): HandleFrame {
  return {
    left: layout.left,
    top: layout.fire.top,
    width: layout.right - layout.left,
    height: layout.fire.bottom - layout.fire.top,
    xMaxS: model.xMaxS,
    lowC: model.lowC,
    highC: model.highC,
  }
}
