import type { ReactNode } from 'react'
import { classNames } from '@/components/ui/class-names'
import { firesideType } from './fireside-type'

/** Hands left, eyes right; one screen of 1280 × 800 without scrolling. All words and figures are given. */
export function FiresideScreen({
  topLine,
  head,
  stage,
  marks,
  figures,
  picture,
  strip,
  person = null,
  advice = null,
  overlay,
}: {
  topLine: ReactNode
  head: ReactNode
  stage: ReactNode
  /** Null for those who only follow. */
  marks: ReactNode
  figures: ReactNode
  picture: ReactNode
  /** A caution, or what does not fit elsewhere; one or two lines under the picture. */
  strip: string | null
  /** Who marks, at a shared tablet; beside the strip. */
  person?: ReactNode
  /** Advice to be taken or waved away, over the strip. */
  advice?: ReactNode
  overlay: ReactNode
}) {
  return (
    <div className="flex h-dvh min-h-[720px] flex-col overflow-hidden">
      {topLine}
      <div className="grid min-h-0 flex-1 grid-cols-[396px_minmax(0,1fr)]">
        <section aria-label="Hands" className="flex min-h-0 flex-col border-r border-line">
          {head}
          {stage}
          {marks}
        </section>
        <section
          aria-label="The firing"
          className="relative grid min-h-0 grid-rows-[auto_minmax(0,1fr)_auto]"
        >
          <div className="grid grid-cols-[428px_minmax(0,1fr)] border-b border-line">{figures}</div>
          <div className="relative min-h-0 pt-2 pr-3 pb-1 pl-2">{picture}</div>
          {advice}
          {strip === null && person === null ? null : (
            <div className="flex items-center justify-between gap-4 border-t border-line">
              <p className={classNames(firesideType.text.className, 'min-w-0 px-6 py-2')}>{strip}</p>
              {person}
            </div>
          )}
          {overlay === null ? null : <div className="absolute right-0 bottom-0 left-0 z-10">{overlay}</div>}
        </section>
      </div>
    </div>
  )
}
