'use client'

import { useState } from 'react'
import type { FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { TextField } from '@/components/ui/text-field'
import type { ShortStep } from '@/lib/firings/short-steps'
import { shortStepWords, usualReasons } from '@/lib/firings/short-steps'
import { FiresideSheet } from './fireside-sheet'

/** The first step without a reason, asked again: before the finish, or to say it in one's own words. */
export function FiresideReasons({
  step,
  goOnWords,
  onReason,
  onGoOn,
  onClose,
}: {
  step: ShortStep
  /** "Finish without a reason", "Not now". */
  goOnWords: string
  onReason: (words: string) => void
  onGoOn: () => void
  onClose: () => void
}) {
  const [words, setWords] = useState('')
  const [isEmpty, setIsEmpty] = useState(false)
  const keep = (event: FormEvent) => {
    event.preventDefault()
    if (words.trim() === '') setIsEmpty(true)
    else onReason(words.trim())
  }
  return (
    <FiresideSheet title={`${shortStepWords(step)}. Why?`} onClose={onClose}>
      <form method="post" onSubmit={keep} noValidate>
        <div className="mb-4 flex flex-wrap gap-3">
          {usualReasons[step.step].map((usual) => (
            <Button key={usual} onClick={() => onReason(usual)}>
              {usual}
            </Button>
          ))}
        </div>
        <TextField
          name="reason"
          label="Or in your own words"
          maxLength={500}
          autoComplete="off"
          value={words}
          onChange={(event) => setWords(event.target.value)}
          error={isEmpty && words.trim() === '' ? 'Write a few words, or touch one above.' : undefined}
        />
        <p className="mt-3 text-soft">The reason stands beside the score and changes nothing in it.</p>
        <div className="mt-4 flex justify-end gap-3">
          <Button onClick={onGoOn}>{goOnWords}</Button>
          <Button kind="due" type="submit">
            Keep the reason
          </Button>
        </div>
      </form>
    </FiresideSheet>
  )
}
