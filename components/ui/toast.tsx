'use client'

import { createContext, useCallback, useContext, useEffect, useMemo, useState } from 'react'
import type { ReactNode } from 'react'
import { classNames } from './class-names'

export type Toast = {
  /** What was done: "Feed marked at 26:40." */
  words: string
  /** Takes it back; offered for the time that the toast stands. */
  onUndo?: () => void | Promise<void>
  isWrong?: boolean
}

/** Long enough to think again, as PRODUCT.md asks of a mark. */
export const TOAST_S = 10

type ShownToast = Toast & { id: number }

const ToastContext = createContext<((toast: Toast) => void) | null>(null)

/** Shows what was just done, with undo. Throws when no ToastProvider stands above. */
export function useToast(): (toast: Toast) => void {
  const show = useContext(ToastContext)
  if (show === null) throw new Error('useToast needs a ToastProvider above it')
  return show
}

let lastId = 0

/** Holds the toasts of a page, at the foot. They wait while a person points at them or has the focus in them. */
export function ToastProvider({ children }: { children: ReactNode }) {
  const [toasts, setToasts] = useState<readonly ShownToast[]>([])
  const drop = useCallback((id: number) => setToasts((now) => now.filter((toast) => toast.id !== id)), [])
  const show = useCallback((toast: Toast) => {
    lastId += 1
    const shown = { ...toast, id: lastId }
    setToasts((now) => [...now.slice(-2), shown])
  }, [])
  const list = useMemo(
    () => toasts.map((toast) => <ToastLine key={toast.id} toast={toast} onGone={drop} />),
    [toasts, drop],
  )
  return (
    <ToastContext value={show}>
      {children}
      <div
        role="status"
        aria-live="polite"
        className="pointer-events-none fixed inset-x-0 bottom-0 z-50 flex flex-col items-center gap-2 p-4"
      >
        {list}
      </div>
    </ToastContext>
  )
}

function ToastLine({ toast, onGone }: { toast: ShownToast; onGone: (id: number) => void }) {
  const [leftS, setLeftS] = useState(TOAST_S)
  const [isHeld, setIsHeld] = useState(false)
  const { id, words, onUndo, isWrong = false } = toast

  useEffect(() => {
    if (isHeld) return
    const timer = setInterval(() => setLeftS((now) => now - 1), 1000)
    return () => clearInterval(timer)
  }, [isHeld])

  useEffect(() => {
    if (leftS <= 0) onGone(id)
  }, [leftS, id, onGone])

  return (
    <div
      className={classNames(
        'pointer-events-auto flex max-w-full items-center gap-4 rounded-control bg-text px-4 py-2 text-ground shadow-float',
        isWrong && 'bg-alarm-red! text-on-alarm!',
      )}
      onMouseEnter={() => setIsHeld(true)}
      onMouseLeave={() => setIsHeld(false)}
      onFocus={() => setIsHeld(true)}
      onBlur={() => setIsHeld(false)}
    >
      <span>{words}</span>
      {onUndo === undefined ? null : (
        <button
          type="button"
          className="min-h-9 font-[640] underline underline-offset-3 in-data-[ground=fireside]:min-h-[85px] in-data-[ground=fireside]:px-6"
          onClick={() => {
            void onUndo()
            onGone(id)
          }}
        >
          Undo
          <span aria-hidden="true" className="ml-1 inline-block min-w-[4ch] font-normal">
            {leftS} s
          </span>
        </button>
      )}
      <button type="button" aria-label="Close" className="min-h-9 px-1" onClick={() => onGone(id)}>
        <svg
          width="12"
          height="12"
          viewBox="0 0 12 12"
          aria-hidden="true"
          className="stroke-current stroke-2"
        >
          <path d="M1 1l10 10M11 1L1 11" />
        </svg>
      </button>
    </div>
  )
}
