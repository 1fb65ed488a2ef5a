import Link from 'next/link'
import type { CSSProperties, ReactNode } from 'react'
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
  height,
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
  /** Of the whole, CSS; left out: the screen's, or more where there is less room (the same panel at 200 %). */
  height?: string | undefined
  children: ReactNode
}) {
  return (
    <div
      className={classNames(
        'flex flex-col',
        height === undefined ? 'min-h-dvh min-[1100px]:h-dvh min-[1100px]:min-h-[640px]' : 'overflow-hidden',
      )}
      style={{ height }}
    >
      <div className="flex min-h-[56px] flex-wrap items-center gap-x-5 border-b border-line px-6 text-[22px] min-[1100px]:flex-nowrap">
        <h1 className="text-[22px] font-[640]">Toasting room</h1>
        <p className="truncate text-soft">{siteName}</p>
        <p className="ml-auto truncate text-soft">{queueWords}</p>
        <p className={deskHref === null ? 'text-[34px] font-[640]' : undefined}>{clock}</p>
        {corner}
        {deskHref === null || corner !== null ? null : (
          <>
            <Link href="/room/wall" className={headLink}>
              Wall
            </Link>
            <Link href={deskHref} className={headLink}>
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
        className={classNames(
          'grid min-h-0 flex-1 min-[1100px]:[grid-template-rows:var(--room-rows)]',
          rows > 6 && 'overflow-y-auto',
        )}
        style={roomRows(rows)}
      >
        {children}
      </div>
    </div>
  )
}

const headLink =
  'flex min-h-[85px] min-w-[85px] items-center justify-center text-[20px] text-water active:bg-wash'

/** Three rows' room at least; more than six scroll. A custom property, so that a narrow screen need not take it. */
function roomRows(rows: number): CSSProperties & Record<'--room-rows', string> {
  return { '--room-rows': `repeat(${Math.max(rows, 3)}, minmax(${rows > 6 ? 116 : 0}px, 1fr))` }
}
