'use client'

import { useState } from 'react'
import type { FormEvent } from 'react'
import type { Taken } from '@/components/probes/check-draft'
import { LiveReading } from '@/components/probes/live-reading'
import type { RecentReadings } from '@/components/probes/use-recent-readings'
import { Button } from '@/components/ui/button'
import { TemperatureField } from '@/components/ui/temperature-field'
import type { TemperatureUnit } from '@/lib/format'
import type { SettlingRule } from '@/lib/science/stability'

/** The probe's own readings while it settles; once it has, they are taken by a touch. By eye where there are none. */
export function CheckSettleStep({
  name,
  live,
  rule,
  unit,
  onTake,
  onBack,
}: {
  name: string
  live: RecentReadings
  rule: SettlingRule
  unit: TemperatureUnit
  onTake: (taken: Taken) => void
  onBack: () => void
}) {
  const { readings, settling, isCut } = live
  const isSettled = settling?.state === 'settled' && !isCut

  function take() {
    const last = readings?.atMs.at(-1)
    if (settling === null || settling.meanC === null || settling.sdC === null || last === undefined) return
    onTake({
      way: 'live',
      takenAt: new Date(last).toISOString(),
      meanC: settling.meanC,
      sdC: settling.sdC,
    })
  }

  return (
    <>
      <div className="grid gap-x-12 gap-y-6 lg:grid-cols-2">
        <section aria-label="Live reading">
          <LiveReading name={name} live={live} rule={rule} unit={unit} />
          <Button
            kind={isSettled ? 'due' : 'main'}
            className="mt-3 min-h-[85px]! w-full text-large!"
            disabled={!isSettled}
            onClick={take}
          >
            Take it
          </Button>
        </section>
        <ByHand unit={unit} onTake={onTake} />
      </div>
      <div className="mt-6">
        <Button className="min-h-14! px-6!" onClick={onBack}>
          Back
        </Button>
      </div>
    </>
  )
}

function ByHand({ unit, onTake }: { unit: TemperatureUnit; onTake: (taken: Taken) => void }) {
  const [tempC, setTempC] = useState<number | null>(null)
  const [isAsked, setIsAsked] = useState(false)

  function submit(event: FormEvent) {
    event.preventDefault()
    setIsAsked(true)
    if (tempC !== null && tempC >= -50 && tempC <= 400) onTake({ way: 'by hand', tempC })
  }

  return (
    <form method="post" onSubmit={submit} noValidate className="lg:border-l lg:border-line lg:pl-12">
      <h2 className="text-large">Or by eye</h2>
      <p className="mt-1 mb-3 text-soft">
        Where the probe is read on another instrument, or its gateway is away: what it reads without any
        correction, once it stands still.
      </p>
      <TemperatureField
        name="measuredTempC"
        label="The probe reads"
        personUnit={unit}
        minC={-50}
        maxC={400}
        decimals={2}
        valueC={tempC}
        onValueChangeC={setTempC}
        error={isAsked && tempC === null ? 'Give what the probe reads, in figures.' : undefined}
      />
      <Button type="submit" className="mt-3 min-h-14! px-6!">
        Use this
      </Button>
    </form>
  )
}
