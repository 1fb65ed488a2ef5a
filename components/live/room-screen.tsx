import Link from 'next/link'
import type { ReactNode } from 'react'
import { classNames } from '@/components/ui/class-names'

/** The room on one screen: a line of words above, then a row a hearth, up to six in 800 px. */
export function RoomScreen({
  siteName,
  queueWords,
  clock,
  deskHref,
  corner = null,
  notices = null,
  problem,
  rows,
  height = '100dvh',
  children,
}: {
  siteName: string
  queueWords: string
  clock: string
  /** Null on a wall screen: it has nothing to touch. */
  deskHref: string | null
  /** In place of the links, at a shared tablet. */
  corner?: ReactNode
  /** Under the line of words: a scan, marks that wait. */
  notices?: ReactNode
  /** What is wrong with the connection, in words. */
  problem: string | null
  rows: number
  /** Of the whole, CSS. */
  height?: string
  children: ReactNode
}) {
  return (
    <div
      className={classNames('flex flex-col', deskHref === null ? 'overflow-hidden' : 'min-h-[640px]')}
      style={{ height }}
    >
      <div className="flex min-h-[56px] items-center gap-7 border-b border-line px-6 text-[22px]">
        <h1 className="text-[22px] font-[640]">Toasting room</h1>
        <p className="truncate text-soft">{siteName}</p>
        <p className="ml-auto truncate text-soft">{queueWords}</p>
        <p className={deskHref === null ? 'text-[34px] font-[640]' : undefined}>{clock}</p>
        {corner}
        {deskHref === null || corner !== null ? null : (
          <>
            <Link href="/room/wall" className="flex min-h-[56px] items-center text-[18px] text-water">
              Wall screen
            </Link>
            <Link href={deskHref} className="flex min-h-[56px] items-center text-[18px] text-water">
              Desk
            </Link>
          </>
        )}
      </div>
      {problem === null ? null : (
        <p
          role="alert"
          className="bg-alarm-amber px-6 py-2 text-[28px] leading-tight font-[640] text-on-alarm"
        >
          {problem}
        </p>
      )}
      {notices}
      <div
        className={classNames('grid min-h-0 flex-1', rows > 6 && 'overflow-y-auto')}
        style={{ gridTemplateRows: `repeat(${Math.max(rows, 3)}, minmax(${rows > 6 ? 116 : 0}px, 1fr))` }}
      >
        {children}
      </div>
    </div>
  )
}
