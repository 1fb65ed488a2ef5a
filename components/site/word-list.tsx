'use client'

import { useState } from 'react'
import { TextArea } from '@/components/ui/text-area'

/** A list of words, a line each; what is typed stays as typed, and empty lines are left out of what is kept. */
export function WordList({
  name,
  label,
  words,
  onWords,
  error,
  isReadOnly,
}: {
  name: string
  label: string
  words: readonly string[]
  onWords: (words: string[]) => void
  error: string | undefined
  isReadOnly: boolean
}) {
  const [typed, setTyped] = useState(words.join('\n'))
  return (
    <TextArea
      name={name}
      label={label}
      hint="A line each, in the order in which they are offered; at most 24."
      rows={7}
      readOnly={isReadOnly}
      value={typed}
      onChange={(event) => {
        setTyped(event.target.value)
        onWords(wordsOf(event.target.value))
      }}
      error={error}
    />
  )
}

/** The words of a text, a line each. */
export function wordsOf(typed: string): string[] {
  return typed
    .split('\n')
    .map((line) => line.trim())
    .filter((line) => line !== '')
}
