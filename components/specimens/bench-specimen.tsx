'use client'

import { useMemo, useState } from 'react'
import { Pair } from '@/components/chart/pair'
import type { DraggedPoint, PairProps } from '@/components/chart/pair-types'
import { Button } from '@/components/ui/button'
import { toleranceBoundsMin } from '@/lib/science/dose-ratio'
import { createDoseAccumulator } from '@/lib/science/heat-dose'
import type { CurvePoint } from '@/lib/science/heat-dose'
import { planTempCAt } from '@/lib/science/plan'
import { staveHistory } from '@/lib/science/stave'
import { samplePlan, samplePlanDose } from './sample-firing'

const start: readonly CurvePoint[] = [
  { timeS: 0, tempC: 60 },
  { timeS: 720, tempC: 150 },
  { timeS: 1260, tempC: 184 },
  { timeS: 2640, tempC: 184 },
  { timeS: 3060, tempC: 196 },
]
const names = ['Warm', 'Climb', 'Hold', 'Deepen']
const model = { refTempC: 200, zC: 34, baseTempC: 120 }

/** The bench's picture: a plan whose corners can be dragged, against an earlier version. */
export function BenchSpecimen() {
  const [history, setHistory] = useState<readonly (readonly CurvePoint[])[]>([start])
  const [points, setPoints] = useState(start)
  const pair = useMemo(() => draw(points), [points])

  function drag(point: DraggedPoint) {
    setPoints((now) =>
      now.map((each, i) => (i === point.pointIndex ? { timeS: point.timeS, tempC: point.tempC } : each)),
    )
  }

  return (
    <>
      <div className="mb-3 flex items-center gap-3">
        <Button
          disabled={history.length < 2}
          onClick={() => {
            setHistory(history.slice(0, -1))
            setPoints(history.at(-2) ?? start)
          }}
        >
          Undo
        </Button>
        <p className="text-soft">Drag a corner, or move it by the arrow keys.</p>
      </div>
      <Pair {...pair} onDragPoint={drag} onDragEnd={() => setHistory((now) => [...now, points])} />
    </>
  )
}

function draw(points: readonly CurvePoint[]): PairProps {
  const endS = points.at(-1)?.timeS ?? 60
  const dense = Array.from({ length: Math.floor(endS / 20) + 1 }, (_, i) => ({
    timeS: i * 20,
    tempC: planTempCAt(points, i * 20) ?? 0,
  }))
  const accumulator = createDoseAccumulator(model)
  return {
    size: 'large',
    title: 'Quay medium, version 5 (invented)',
    planBand: points.map(({ timeS, tempC }) => ({ timeS, lowC: tempC - 7, midC: tempC, highC: tempC + 7 })),
    planName: '',
    stages: names.map((name, i) => ({
      name,
      startS: points[i]?.timeS ?? 0,
      endS: points[i + 1]?.timeS ?? 0,
      isSelected: name === 'Hold',
    })),
    lead: {
      name: 'version 5',
      timeS: points.map((point) => point.timeS),
      tempC: points.map((point) => point.tempC),
    },
    others: [
      {
        name: 'version 4',
        timeS: samplePlan.map((point) => point.timeS),
        tempC: samplePlan.map((point) => point.tempC),
      },
    ],
    dose: {
      title: 'Dose at 2 mm, minutes at 200 °C',
      timesS: dense.map((point) => point.timeS),
      equivalentMin: dense.map((point) => accumulator.add(point.timeS, point.tempC)),
      others: [samplePlanDose()],
      target: { targetMin: 13.8, ...toleranceBoundsMin(13.8, 0.12) },
    },
    wood: staveHistory({
      thicknessMm: 27,
      probeDepthMm: 2,
      moisturePercent: 18,
      specificGravity: 0.64,
      roomTempC: 21,
      coldFaceHWPerM2K: 10,
      dose: model,
      toastDepthDoseMin: 0.1,
      probeDepthErrorMm: 0.5,
      diffusivityErrorShare: 0.1,
      points: dense,
      columns: 120,
    }),
    limitC: 215,
    unit: 'C',
  }
}
