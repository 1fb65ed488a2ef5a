'use client'

import { useState } from 'react'
import type { FormEvent } from 'react'
import { LiveReading } from '@/components/probes/live-reading'
import type { RecentReadings } from '@/components/probes/use-recent-readings'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import { Notice } from '@/components/ui/notice'
import type { Problem } from '@/components/ui/problem'
import { TemperatureField } from '@/components/ui/temperature-field'
import { formatTemp } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { StudyDto } from '@/lib/probes/study-schema'
import { shownSentence } from '@/lib/recipes/shown-sentence'
import type { SettlingRule } from '@/lib/science/stability'

export type PlacementDraft = { takenAt: string } | { placedTempC: number; referenceTempC: number }

export type StudyPlacingProps = {
  study: StudyDto
  placed: RecentReadings
  fixed: RecentReadings
  rule: SettlingRule
  baseTempC: number
  unit: TemperatureUnit
  isBusy: boolean
  problem: Problem | null
  onPlace: (draft: PlacementDraft) => Promise<boolean>
}

const labels = { placedTempC: 'The placed probe', referenceTempC: 'The probe that stays' }

/** The next placement: what to do, both readings, and the touch that takes them once both have settled. */
export function StudyPlacing(props: StudyPlacingProps) {
  const { study, placed, fixed, rule, unit, isBusy, problem, onPlace } = props
  const [isByEye, setIsByEye] = useState(false)
  const areSettled = [placed, fixed].every((one) => one.settling?.state === 'settled' && !one.isCut)
  const count = study.placements.length

  function take() {
    const ends = [placed, fixed].map((one) => one.readings?.atMs.at(-1) ?? NaN)
    void onPlace({ takenAt: new Date(Math.min(...ends)).toISOString() })
  }

  return (
    <section>
      <h2 className="text-large">Placement {count + 1}</h2>
      <ol className="mt-1 list-decimal pl-6">
        <li>
          Take {study.probe.name} out of its place, whole, and put it back as for a firing, by the same hand
          and in the same way.
        </li>
        <li>Leave {study.reference.name} where it is, and the heat as it is.</li>
        <li>Wait until both have settled.</li>
      </ol>
      <Notice tone="attention" className="mt-3">
        The wood, the probe and its sheath are hot: gloves, and stand clear of steam and smoke. Follow local
        code and the responsible person.
      </Notice>
      <div className="mt-4">
        <FormError problem={shown(problem, unit)} labels={labels} />
      </div>
      {isByEye ? (
        <ByEye {...props} onBack={() => setIsByEye(false)} />
      ) : (
        <>
          <div className="mt-2 grid gap-x-12 gap-y-4 md:grid-cols-2">
            <LiveReading name={study.probe.name} live={placed} rule={rule} unit={unit} />
            <LiveReading name={study.reference.name} live={fixed} rule={rule} unit={unit} />
          </div>
          <div className="mt-2 flex flex-wrap gap-3">
            <Button
              kind={areSettled ? 'due' : 'main'}
              className="min-h-[85px]! min-w-64 flex-1 text-large!"
              disabled={!areSettled}
              isBusy={isBusy}
              onClick={take}
            >
              Take both
            </Button>
            <Button className="min-h-[85px]! px-6!" onClick={() => setIsByEye(true)}>
              By eye instead
            </Button>
          </div>
        </>
      )}
    </section>
  )
}

function ByEye({
  unit,
  baseTempC,
  isBusy,
  problem,
  onPlace,
  onBack,
}: StudyPlacingProps & { onBack: () => void }) {
  const [placedTempC, setPlacedTempC] = useState<number | null>(null)
  const [referenceTempC, setReferenceTempC] = useState<number | null>(null)
  const [isAsked, setIsAsked] = useState(false)
  const missing = 'Give what it reads, in figures.'

  async function submit(event: FormEvent) {
    event.preventDefault()
    setIsAsked(true)
    if (placedTempC === null || referenceTempC === null) return
    if (!(await onPlace({ placedTempC, referenceTempC }))) return
    setPlacedTempC(null)
    setReferenceTempC(null)
    setIsAsked(false)
  }

  return (
    <form method="post" onSubmit={(event) => void submit(event)} noValidate>
      <div className="mt-2 grid max-w-[34rem] gap-x-8 gap-y-3 sm:grid-cols-2">
        <TemperatureField
          name="placedTempC"
          label="The placed probe reads"
          personUnit={unit}
          valueC={placedTempC}
          onValueChangeC={setPlacedTempC}
          error={problem?.fields?.['placedTempC'] ?? (isAsked && placedTempC === null ? missing : undefined)}
        />
        <TemperatureField
          name="referenceTempC"
          label="The probe that stays reads"
          hint={`${formatTemp(baseTempC, unit)} or more, where a dose is made.`}
          personUnit={unit}
          valueC={referenceTempC}
          onValueChangeC={setReferenceTempC}
          error={
            shownField(problem, 'referenceTempC', unit) ??
            (isAsked && referenceTempC === null ? missing : undefined)
          }
        />
      </div>
      <div className="mt-3 flex flex-wrap gap-3">
        <Button type="submit" kind="main" className="min-h-14! px-6!" isBusy={isBusy}>
          Keep this placement
        </Button>
        <Button className="min-h-14! px-6!" onClick={onBack}>
          From the probes themselves
        </Button>
      </div>
    </form>
  )
}

function shownField(problem: Problem | null, name: string, unit: TemperatureUnit): string | undefined {
  const sentence = problem?.fields?.[name]
  return sentence === undefined ? undefined : shownSentence(name, sentence, unit)
}

/** The server's sentences say °C. */
function shown(problem: Problem | null, unit: TemperatureUnit): Problem | null {
  if (problem === null || problem.fields === undefined) return problem
  const fields = Object.entries(problem.fields).map(([name, sentence]) => [
    name,
    shownSentence(name, sentence, unit),
  ])
  return { ...problem, fields: Object.fromEntries(fields) }
}
