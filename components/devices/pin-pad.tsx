'use client'

import { useEffect } from 'react'
import { classNames } from '@/components/ui/class-names'

const MOST = 6
export const PIN_LEAST = 4

/** A figure more or less by key or touch; what does not fit leaves it as it was. */
export function nextFigures(before: string, key: string): string {
  if (key === 'Backspace') return before.slice(0, -1)
  return /^\d$/.test(key) && before.length < MOST ? before + key : before
}

const keyClass =
  'flex min-h-[92px] touch-manipulation items-center justify-center rounded-control border-3 border-edge bg-raised text-[40px] leading-none font-[640] active:bg-wash disabled:border-line disabled:text-mute'

/** Large figures for gloves, and the keyboard's own; what was typed shows as dots. */
export function PinPad({
  figures,
  isBusy,
  onFigures,
  onEnter,
}: {
  figures: string
  isBusy: boolean
  onFigures: (figures: string) => void
  onEnter: () => void
}) {
  const isEnough = figures.length >= PIN_LEAST
  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      if (isBusy || event.ctrlKey || event.metaKey || event.altKey) return
      // A button that has the focus takes its own Enter.
      if (event.key === 'Enter' && isEnough && !(event.target instanceof HTMLButtonElement)) onEnter()
      const next = nextFigures(figures, event.key)
      if (next === figures) return
      event.preventDefault()
      onFigures(next)
    }
    window.addEventListener('keydown', onKey)
    return () => window.removeEventListener('keydown', onKey)
  }, [figures, isBusy, isEnough, onFigures, onEnter])

  return (
    <div className="w-full max-w-[440px]">
      <p
        role="status"
        aria-label={`${figures.length} figures typed`}
        className="mb-3 flex h-[56px] items-center justify-center gap-4 border-b border-line"
      >
        {Array.from({ length: Math.max(PIN_LEAST, figures.length) }, (_, i) => (
          <span
            key={i}
            aria-hidden="true"
            className={classNames(
              'size-[22px] rounded-full border-3 border-edge',
              i < figures.length && 'border-text bg-text',
            )}
          />
        ))}
      </p>
      <div role="group" aria-label="PIN" className="grid grid-cols-3 gap-3">
        {['1', '2', '3', '4', '5', '6', '7', '8', '9'].map((figure) => (
          <button
            key={figure}
            type="button"
            disabled={isBusy}
            className={keyClass}
            onClick={() => onFigures(nextFigures(figures, figure))}
          >
            {figure}
          </button>
        ))}
        <button
          type="button"
          disabled={isBusy || figures === ''}
          className={classNames(keyClass, 'text-[26px]!')}
          onClick={() => onFigures(nextFigures(figures, 'Backspace'))}
        >
          Delete
        </button>
        <button
          type="button"
          disabled={isBusy}
          className={keyClass}
          onClick={() => onFigures(nextFigures(figures, '0'))}
        >
          0
        </button>
        <button
          type="button"
          disabled={isBusy || !isEnough}
          data-due={isEnough || undefined}
          className={classNames(
            keyClass,
            'text-[26px]!',
            isEnough && !isBusy && 'border-water! bg-water! text-on-water',
          )}
          onClick={onEnter}
        >
          {isBusy ? 'Looking' : 'Enter'}
        </button>
      </div>
    </div>
  )
}
