import type { ReactNode } from 'react'
import { classNames } from '@/components/ui/class-names'
import { firesideType } from './fireside-type'

/**
 * Hands left, eyes right; one screen of 1280 × 800 without scrolling. All words and figures are given. Where there is
 * less room (the same panel at 200 %) the two stand one under the other and the page scrolls, so that nothing is lost.
 */
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
    <div className="flex min-h-dvh flex-col min-[1100px]:h-dvh min-[1100px]:min-h-[720px] min-[1100px]:overflow-hidden">
      {topLine}
      <div className="grid min-h-0 flex-1 min-[1100px]:grid-cols-[396px_minmax(0,1fr)]">
        <section aria-label="Hands" className="flex min-h-0 flex-col border-line min-[1100px]:border-r">
          {head}
          {stage}
          {marks}
        </section>
        <section
          aria-label="The firing"
          className="relative grid min-h-0 grid-rows-[auto_minmax(0,1fr)_auto]"
        >
          <div className="grid border-b border-line min-[1100px]:grid-cols-[428px_minmax(0,1fr)]">
            {figures}
          </div>
          <div className="relative h-[560px] min-h-0 pt-2 pr-3 pb-1 pl-2 min-[1100px]:h-auto">{picture}</div>
          {advice}
          {strip === null && person === null ? null : (
            <div className="flex items-center justify-between gap-4 border-t border-line">
              <p className={classNames(firesideType.text.className, 'min-w-0 px-6 py-2')}>{strip}</p>
              {person}
            </div>
          )}
          {overlay === null ? null : (
            <div className="fixed right-0 bottom-0 left-0 z-10 max-h-[60dvh] overflow-y-auto min-[1100px]:absolute min-[1100px]:max-h-none">
              {overlay}
            </div>
          )}
        </section>
      </div>
    </div>
  )
}
