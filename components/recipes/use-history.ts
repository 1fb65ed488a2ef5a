import { useCallback, useState } from 'react'

type History<T> = { past: readonly T[]; present: T; future: readonly T[]; mergeKey: string | null }

/** Steps that can be taken back. */
const DEPTH = 200

/** Pure part of {@link useHistory}: a change with the key of the one before is the same step of undo. */
export function pushHistory<T>(history: History<T>, next: T, mergeKey: string | null): History<T> {
  if (Object.is(next, history.present)) return history
  const isSameStep = mergeKey !== null && mergeKey === history.mergeKey && history.past.length > 0
  const past = isSameStep ? history.past : [...history.past, history.present].slice(-DEPTH)
  return { past, present: next, future: [], mergeKey }
}

export function undoHistory<T>(history: History<T>): History<T> {
  const last = history.past.at(-1)
  if (last === undefined) return history
  return {
    past: history.past.slice(0, -1),
    present: last,
    future: [history.present, ...history.future],
    mergeKey: null,
  }
}

export function redoHistory<T>(history: History<T>): History<T> {
  const [next, ...future] = history.future
  if (next === undefined) return history
  return { past: [...history.past, history.present], present: next, future, mergeKey: null }
}

/** A value whose changes can be undone and redone. Typing on in one field is one step (`mergeKey`: the field). */
export function useHistory<T>(initial: T) {
  const [history, setHistory] = useState<History<T>>({
    past: [],
    present: initial,
    future: [],
    mergeKey: null,
  })
  const change = useCallback(
    (make: (present: T) => T, mergeKey: string | null = null) =>
      setHistory((now) => pushHistory(now, make(now.present), mergeKey)),
    [],
  )
  const undo = useCallback(() => setHistory(undoHistory), [])
  const redo = useCallback(() => setHistory(redoHistory), [])
  /** Ends the present step: the next change in the same field is a step of its own. */
  const endStep = useCallback(() => setHistory((now) => ({ ...now, mergeKey: null })), [])
  return {
    present: history.present,
    canUndo: history.past.length > 0,
    canRedo: history.future.length > 0,
    change,
    undo,
    redo,
    endStep,
  }
}
