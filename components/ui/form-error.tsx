'use client'

import { useEffect, useRef } from 'react'
import type { MouseEvent } from 'react'
import { fieldId } from './field-id'
import type { Problem } from './problem'

/** What went wrong with a form, above it: takes the focus, and each line leads to its field. */
export function FormError({
  problem,
  labels = {},
}: {
  problem: Problem | null | undefined
  labels?: Readonly<Record<string, string>>
}) {
  const box = useRef<HTMLDivElement>(null)
  useEffect(() => {
    if (problem) box.current?.focus()
  }, [problem])
  if (!problem) return null
  const fields = Object.entries(problem.fields ?? {})
  return (
    <div ref={box} role="alert" tabIndex={-1} className="mb-4 border-l-4 border-red py-1 pl-3">
      <p className="font-[640]">{problem.title ?? 'This was not saved.'}</p>
      {/* With named fields the sentences beside them say it all. */}
      {problem.detail === undefined || problem.detail === problem.title || fields.length > 0 ? null : (
        <p>{problem.detail}</p>
      )}
      {fields.length === 0 ? null : (
        <ul className="mt-1">
          {fields.map(([name, message]) => (
            <li key={name}>
              <a href={`#${fieldId(name)}`} className="link" onClick={(event) => jumpToField(event, name)}>
                {labels[name] === undefined ? message : `${labels[name]}: ${message}`}
              </a>
            </li>
          ))}
        </ul>
      )}
    </div>
  )
}

function jumpToField(event: MouseEvent, name: string) {
  const field =
    document.getElementById(fieldId(name)) ?? document.querySelector(`[name="${CSS.escape(name)}"]`)
  if (!(field instanceof HTMLElement)) return
  event.preventDefault()
  field.focus()
  field.scrollIntoView({ block: 'center' })
}
