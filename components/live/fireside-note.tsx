'use client'

import { useState } from 'react'
import type { FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { TextArea } from '@/components/ui/text-area'
import { FiresideSheet } from './fireside-sheet'

/** Words that a toaster writes most; a touch puts them in. Site data later, the cooper's usual ones now. */
const usualNotes = ['Smoke', 'Flare', 'Blister', 'One side hot', 'Slow to climb', 'Fire low', 'Stave cracked']

/** A note in the toaster's own words; its time is when the sheet was opened. */
export function FiresideNote({ onSave, onClose }: { onSave: (words: string) => void; onClose: () => void }) {
  const [words, setWords] = useState('')
  const [isEmpty, setIsEmpty] = useState(false)
  const save = (event: FormEvent) => {
    event.preventDefault()
    if (words.trim() === '') setIsEmpty(true)
    else onSave(words.trim())
  }
  return (
    <FiresideSheet title="Note" onClose={onClose}>
      <form method="post" onSubmit={save} noValidate>
        <div className="mb-4 flex flex-wrap gap-3">
          {usualNotes.map((usual) => (
            <Button
              key={usual}
              onClick={() =>
                setWords((now) => (now.trim() === '' ? usual : `${now.trim()}, ${usual.toLowerCase()}`))
              }
            >
              {usual}
            </Button>
          ))}
        </div>
        <TextArea
          name="words"
          label="What you see"
          rows={3}
          maxLength={500}
          autoFocus
          value={words}
          onChange={(event) => setWords(event.target.value)}
          error={isEmpty && words.trim() === '' ? 'Write a few words, or touch one above.' : undefined}
        />
        <div className="mt-4 flex justify-end gap-3">
          <Button onClick={onClose}>Cancel</Button>
          <Button kind="due" type="submit">
            Keep the note
          </Button>
        </div>
      </form>
    </FiresideSheet>
  )
}
