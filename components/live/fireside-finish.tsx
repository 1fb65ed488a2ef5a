'use client'

import { useState } from 'react'
import type { FormEvent, ReactNode } from 'react'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import type { Problem } from '@/components/ui/problem'
import { TemperatureField } from '@/components/ui/temperature-field'
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

/** The site's own words, offered at the finish; any others serve too. */
export type SiteWords = { colour: readonly string[]; smell: readonly string[] }

/** What a person saw and smelt at the end; kept beside the score. What was typed stays until it is taken. */
export function FiresideFinish({
  unit,
  siteWords,
  isBusy,
  problem,
  waitingCount,
  losses,
  photos,
  onFinish,
  onClose,
}: {
  unit: TemperatureUnit
  siteWords: SiteWords
  isBusy: boolean
  problem: Problem | null
  /** Marks that are not yet sent: the firing is finished after them. */
  waitingCount: number
  /** Taken and noted here, and kept at once. */
  losses: ReactNode
  photos: ReactNode
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
      <p className="mb-3 text-soft">{cautions.rest}</p>
      <form id="finish-form" method="post" onSubmit={finish} noValidate>
        <div className="grid grid-cols-2 gap-6">
          <Suggested
            name="colour"
            label="Colour"
            words={siteWords.colour}
            value={colour}
            onValue={setColour}
            error={problem?.fields?.['colour']}
          />
          <Suggested
            name="smell"
            label="Smell"
            words={siteWords.smell}
            value={smell}
            onValue={setSmell}
            error={problem?.fields?.['smell']}
          />
        </div>
        <div className="mt-3 grid grid-cols-[300px_1fr] gap-6">
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
          <TextField
            name="remarks"
            label="Remarks"
            isOptional
            maxLength={4000}
            autoComplete="off"
            value={remarks}
            onChange={(event) => setRemarks(event.target.value)}
            error={problem?.fields?.['remarks']}
          />
        </div>
      </form>
      <div className="mt-4 grid grid-cols-2 gap-6">
        {photos}
        {losses}
      </div>
      <div className="mt-4 flex justify-end gap-3">
        <Button onClick={onClose} disabled={isBusy}>
          Not yet
        </Button>
        <Button kind="due" type="submit" form="finish-form" isBusy={isBusy}>
          {isBusy ? 'Finishing' : 'Finish'}
        </Button>
      </div>
    </FiresideSheet>
  )
}

function Suggested({
  name,
  label,
  words,
  value,
  onValue,
  error,
}: {
  name: string
  label: string
  words: readonly string[]
  value: string
  onValue: (value: string) => void
  error: string | undefined
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
        error={error}
      />
      <div className="mt-2 flex max-h-[178px] flex-wrap gap-2 overflow-y-auto">
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
