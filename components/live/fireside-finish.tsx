'use client'

import { useState } from 'react'
import type { FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import type { Problem } from '@/components/ui/problem'
import { TemperatureField } from '@/components/ui/temperature-field'
import { TextArea } from '@/components/ui/text-area'
import { TextField } from '@/components/ui/text-field'
import type { TemperatureUnit } from '@/lib/format'
import { cautions } from './fireside-cautions'
import { FiresideSheet } from './fireside-sheet'

export type FinishWords = {
  colour: string | null
  smell: string | null
  outsideTempC: number | null
  remarks: string
}

/** Suggestions only; any other words serve. */
export const smellWords = ['bread', 'almond', 'vanilla', 'coffee', 'smoke', 'burnt'] as const
export const colourWords = ['straw', 'gold', 'hazel', 'chestnut', 'dark brown', 'black at the edge'] as const

/** What a person saw and smelt at the end; kept beside the score. What was typed stays until it is taken. */
export function FiresideFinish({
  unit,
  isBusy,
  problem,
  waitingCount,
  onFinish,
  onClose,
}: {
  unit: TemperatureUnit
  isBusy: boolean
  problem: Problem | null
  /** Marks that are not yet sent: the firing is finished after them. */
  waitingCount: number
  onFinish: (words: FinishWords) => void
  onClose: () => void
}) {
  const [colour, setColour] = useState('')
  const [smell, setSmell] = useState('')
  const [outsideTempC, setOutsideTempC] = useState<number | null>(null)
  const [remarks, setRemarks] = useState('')
  const finish = (event: FormEvent) => {
    event.preventDefault()
    onFinish({ colour: orNull(colour), smell: orNull(smell), outsideTempC, remarks: remarks.trim() })
  }
  return (
    <FiresideSheet title="Finish this firing" isWide onClose={onClose}>
      <form method="post" onSubmit={finish} noValidate>
        <FormError
          problem={problem}
          labels={{
            colour: 'Colour',
            smell: 'Smell',
            outsideTempC: 'Outside temperature',
            remarks: 'Remarks',
          }}
        />
        {waitingCount === 0 ? null : (
          <p className="mb-3 text-amber">
            {waitingCount === 1 ? 'One mark waits' : `${waitingCount} marks wait`} to be sent; the firing is
            finished once they are.
          </p>
        )}
        <p className="mb-4 text-soft">{cautions.rest}</p>
        <div className="grid grid-cols-2 gap-6">
          <Suggested name="colour" label="Colour" words={colourWords} value={colour} onValue={setColour} />
          <Suggested name="smell" label="Smell" words={smellWords} value={smell} onValue={setSmell} />
        </div>
        <div className="mt-4 grid grid-cols-[300px_1fr] gap-6">
          <TemperatureField
            name="outsideTempC"
            label="Outside, by a hand meter"
            isOptional
            personUnit={unit}
            valueC={outsideTempC}
            onValueChangeC={setOutsideTempC}
            minC={-20}
            maxC={300}
            error={problem?.fields?.['outsideTempC']}
          />
          <TextArea
            name="remarks"
            label="Remarks"
            isOptional
            rows={2}
            maxLength={4000}
            value={remarks}
            onChange={(event) => setRemarks(event.target.value)}
            error={problem?.fields?.['remarks']}
          />
        </div>
        <div className="mt-5 flex justify-end gap-3">
          <Button onClick={onClose} disabled={isBusy}>
            Not yet
          </Button>
          <Button kind="due" type="submit" isBusy={isBusy}>
            {isBusy ? 'Finishing' : 'Finish'}
          </Button>
        </div>
      </form>
    </FiresideSheet>
  )
}

function Suggested({
  name,
  label,
  words,
  value,
  onValue,
}: {
  name: string
  label: string
  words: readonly string[]
  value: string
  onValue: (value: string) => void
}) {
  return (
    <div>
      <TextField
        name={name}
        label={label}
        isOptional
        maxLength={80}
        autoComplete="off"
        value={value}
        onChange={(event) => onValue(event.target.value)}
      />
      <div className="mt-2 flex flex-wrap gap-2">
        {words.map((word) => (
          <button
            key={word}
            type="button"
            aria-pressed={value === word}
            className="control min-w-[85px] px-4 aria-pressed:border-text! aria-pressed:font-[640]"
            onClick={() => onValue(value === word ? '' : word)}
          >
            {word}
          </button>
        ))}
      </div>
    </div>
  )
}

function orNull(typed: string): string | null {
  return typed.trim() === '' ? null : typed.trim()
}
