'use client'

import { classNames } from '@/components/ui/class-names'
import { calls } from './fireside-calls'
import type { Call } from './fireside-calls'
import { cautionFor } from './fireside-cautions'
import { firesideType } from './fireside-type'

/** How long a mark can be taken back. */
export const UNDO_S = 10

/** What was just marked: can be taken back, or said to have been a minute or two ago. */
export type Touched = {
  id: string
  /** "Feed", "Hold ended". */
  words: string
  atMs: number
  touchedMs: number
  /** 0, 1 or 2. */
  minutesAgo: number
  /** A phase begins for good; its time can still be moved. */
  isUndoable: boolean
  /** The stage that ended: the toaster may say whether early, right or late. */
  endedStage: number | null
  call: Call | null
}

/** Whole seconds left in which it can be taken back. */
export function undoLeftS(touched: Touched, nowMs: number): number {
  return Math.max(0, Math.ceil(UNDO_S - (nowMs - touched.touchedMs) / 1000))
}

/** A call may be made a little longer than an undo. */
export function isTouchShown(touched: Touched, nowMs: number): boolean {
  const asksCall = touched.endedStage !== null && touched.call === null
  return nowMs - touched.touchedMs < (asksCall ? 2 * UNDO_S : UNDO_S) * 1000
}

export type AfterTouchProps = {
  touched: Touched
  markedAt: string
  nowMs: number
  /** Marks before this are refused: the firing had not begun. */
  earliestMs: number
  onUndo: () => void
  onMinutesAgo: (minutes: number) => void
  onCall: (call: Call) => void
}

const button = classNames(
  'control min-w-[85px] touch-manipulation px-5 whitespace-nowrap aria-pressed:border-text! aria-pressed:font-[640]',
)

/** Stands over the foot of the picture, beside the marks, for ten seconds after a touch. */
export function AfterTouch({
  touched,
  markedAt,
  nowMs,
  earliestMs,
  onUndo,
  onMinutesAgo,
  onCall,
}: AfterTouchProps) {
  const leftS = undoLeftS(touched, nowMs)
  const caution = cautionFor(touched.words.toLowerCase())
  return (
    <div role="status" className="border-t-3 border-water bg-raised px-6 py-4">
      {caution === null ? null : <p className={classNames(firesideType.text.className, 'mb-3')}>{caution}</p>}
      {touched.endedStage === null ? null : <CallRow call={touched.call} onCall={onCall} />}
      <div className="flex flex-wrap items-center gap-3">
        <p className={classNames(firesideType.mark.className, 'mr-auto')}>
          {touched.words} <span className="font-normal text-soft">{markedAt}</span>
        </p>
        {[1, 2].map((minutes) => {
          const isChosen = touched.minutesAgo === minutes
          const isTooEarly = touched.touchedMs - minutes * 60_000 < earliestMs
          if (leftS === 0 || isTooEarly) return null
          return (
            <button
              key={minutes}
              type="button"
              aria-pressed={isChosen}
              className={button}
              onClick={() => onMinutesAgo(isChosen ? 0 : minutes)}
            >
              {minutes} min ago
            </button>
          )
        })}
        {touched.isUndoable && leftS > 0 ? (
          <button type="button" className={classNames(button, 'border-water! text-water')} onClick={onUndo}>
            Undo <span aria-hidden="true">{leftS}</span>
          </button>
        ) : null}
      </div>
    </div>
  )
}

function CallRow({ call, onCall }: { call: Call | null; onCall: (call: Call) => void }) {
  return (
    <div className="mb-3 flex flex-wrap items-center gap-3">
      <p className={classNames(firesideType.label.className, 'mr-auto')}>
        {call === null ? 'Your own call, if you like: was it' : 'Your call'}
      </p>
      {call === null ? (
        calls.map((one) => (
          <button key={one} type="button" className={button} onClick={() => onCall(one)}>
            {one}
          </button>
        ))
      ) : (
        <p className={firesideType.mark.className}>{call}</p>
      )}
    </div>
  )
}
