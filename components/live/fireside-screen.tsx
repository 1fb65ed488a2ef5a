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
          {strip === null ? null : (
            <p className={classNames(firesideType.text.className, 'border-t border-line px-6 py-2')}>
              {strip}
            </p>
          )}
          {overlay}
        </section>
      </div>
    </div>
  )
}
