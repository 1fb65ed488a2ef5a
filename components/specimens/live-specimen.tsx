'use client'

import { useEffect, useMemo, useRef, useState } from 'react'
import { Pair } from '@/components/chart/pair'
import type { PairHandle, PairProps } from '@/components/chart/pair-types'
import { Button } from '@/components/ui/button'
import { sampleCurve } from './sample-firing'

const PUSHES_PER_S = 5
const SPEED = 20

/** A moving pair: pushes points through the handle without rendering React, twenty times as fast as life. */
export function LiveSpecimen({ props, fromS }: { props: PairProps; fromS: number }) {
  const pair = useRef<PairHandle>(null)
  const [isRunning, setIsRunning] = useState(false)
  const all = useMemo(() => sampleCurve('bilge A', { seed: 4, endS: 2700 }), [])

  useEffect(() => {
    if (!isRunning) return
    let atS = fromS
    const timer = setInterval(() => {
      const readings = Array.from({ length: SPEED / PUSHES_PER_S }, (_, i) => ({
        timeS: atS + i + 1,
        leadC: all.tempC[atS + i + 1] ?? null,
      }))
      atS += readings.length
      pair.current?.push(readings)
      pair.current?.setNow(atS)
      pair.current?.setFuture(null)
      if (atS >= 2700) setIsRunning(false)
    }, 1000 / PUSHES_PER_S)
    return () => clearInterval(timer)
  }, [isRunning, fromS, all])

  return (
    <div className="flex h-full flex-col">
      <div className="min-h-0 flex-1">
        <Pair {...props} ref={pair} className="h-full" />
      </div>
      <div className="absolute right-0 bottom-0 opacity-0 focus-within:opacity-100 hover:opacity-100">
        <Button onClick={() => setIsRunning((now) => !now)}>{isRunning ? 'Stop' : 'Run'}</Button>
      </div>
    </div>
  )
}
