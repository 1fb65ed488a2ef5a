'use client'

import Link from 'next/link'
import { useState } from 'react'
import type { FormEvent, ReactNode } from 'react'
import { Button } from '@/components/ui/button'
import { buttonClass } from '@/components/ui/button-style'
import { classNames } from '@/components/ui/class-names'
import { FormError } from '@/components/ui/form-error'
import type { Problem } from '@/components/ui/problem'
import type { PieceDto } from '@/lib/batches/schema'
import type { ProbeDto } from '@/lib/probes/schema'
import type { RecipeContent } from '@/lib/recipes/schema'
import { followLocalCode } from './fireside-cautions'
import { firesideType } from './fireside-type'
import type { StartItem } from './room-start-list'
import { RoomStartMoisture } from './room-start-moisture'
import type { MoistureMethod } from './room-start-moisture'
import { RoomStartOverride } from './room-start-override'
import { RoomStartPieces } from './room-start-pieces'
import { RoomStartProbes } from './room-start-probes'

export type StartChoice = {
  moisturePercent: number | null
  moistureMethod: MoistureMethod | null
  override?: { password: string; reason: string }
}

export type RoomStartFormProps = {
  hearthNumber: number
  pieces: readonly PieceDto[]
  isSearching: boolean
  /** What a barcode scanner found out. */
  scanWords?: string | null
  search: string
  onSearch: (search: string) => void
  /** Those that were over a fire before, instead of the queue. */
  isAgain: boolean
  onAgain: (isAgain: boolean) => void
  /** From the last firings like the chosen one's next. */
  nextLine: string | null
  chosen: PieceDto | null
  onChoose: (piece: PieceDto) => void
  /** The chosen barrel's recipe; null while it is fetched. */
  content: RecipeContent | null
  probes: readonly ProbeDto[]
  lead: ProbeDto | null
  /** Where there is more than one source of water. */
  waterChoice: ReactNode
  items: readonly StartItem[]
  isTrial: boolean
  isBusy: boolean
  problem: Problem | null
  /** The server asks a signature because a check is out of date. */
  asksOverride: boolean
  onStart: (choice: StartChoice) => void
}

const labels = {
  pieceId: 'Barrel',
  hearthId: 'Hearth',
  'probes.lead': 'Lead probe',
  moisturePercent: 'Stave moisture',
  'override.password': 'Password',
  'override.reason': 'Reason',
  override: 'Override',
}

/** What goes over the fire, and the start list; the main action is filled once everything is ticked. */
export function RoomStartForm(props: RoomStartFormProps) {
  const [ticked, setTicked] = useState<ReadonlySet<string>>(new Set())
  const [moisturePercent, setMoisturePercent] = useState<number | null>(null)
  const [method, setMethod] = useState<MoistureMethod>('meter')
  const [override, setOverride] = useState({ password: '', reason: '' })
  const [isAsked, setIsAsked] = useState(false)
  const open = props.items.filter((item) => !ticked.has(item.id))
  const isDue = open.length === 0 && props.chosen !== null

  const start = (event: FormEvent) => {
    event.preventDefault()
    setIsAsked(true)
    if (!isDue) return
    props.onStart({
      moisturePercent,
      moistureMethod: moisturePercent === null ? null : method,
      ...(props.asksOverride ? { override } : {}),
    })
  }
  const toggle = (id: string) =>
    setTicked((before) => {
      const next = new Set(before)
      if (!next.delete(id)) next.add(id)
      return next
    })

  return (
    <form
      method="post"
      onSubmit={start}
      noValidate
      className="grid min-h-dvh min-[1100px]:grid-cols-[minmax(0,1fr)_600px]"
    >
      <div className="flex min-w-0 flex-col border-r border-line px-6 py-4">
        <div className="flex items-center justify-between gap-4">
          <h1 className="text-title">
            Hearth {props.hearthNumber}, {props.isTrial ? 'trial preheat' : 'preheat'}
          </h1>
          <Link href="/room" className={buttonClass('plain')}>
            Back to the room
          </Link>
        </div>
        <RoomStartPieces {...props} />
        {props.nextLine === null ? null : (
          <p className={classNames(firesideType.text.className, 'mt-3 font-[560]')}>{props.nextLine}</p>
        )}
        <RoomStartProbes
          probes={props.probes}
          lead={props.lead}
          leadPlace={props.content?.leadPlace ?? null}
          error={props.problem?.fields?.['probes.lead'] ?? props.problem?.fields?.['probes']}
        />
        <RoomStartMoisture
          value={moisturePercent}
          onValue={setMoisturePercent}
          method={method}
          onMethod={setMethod}
          preheat={props.content?.preheat ?? null}
          error={props.problem?.fields?.['moisturePercent']}
        />
      </div>
      <div className="flex min-w-0 flex-col px-6 py-4">
        <FormError problem={props.problem} labels={labels} />
        {props.asksOverride ? (
          <RoomStartOverride value={override} onValue={setOverride} fields={props.problem?.fields ?? {}} />
        ) : null}
        <fieldset className="min-w-0">
          <legend className={classNames(firesideType.label.className, 'mb-1 font-[640]')}>
            Before the fire
          </legend>
          {props.waterChoice}
          {props.items.map((item) => (
            <StartTick
              key={item.id}
              item={item}
              isTicked={ticked.has(item.id)}
              isMissing={isAsked && !ticked.has(item.id)}
              onToggle={() => toggle(item.id)}
            />
          ))}
        </fieldset>
        <p className={classNames(firesideType.small.className, 'mt-2 text-soft')}>{followLocalCode}</p>
        <Button
          type="submit"
          kind={isDue ? 'due' : 'main'}
          isBusy={props.isBusy}
          className="mt-3 w-full flex-col gap-0!"
          data-due={isDue || undefined}
        >
          <span>{props.isBusy ? 'Starting' : 'Start preheat'}</span>
          <span className={classNames(firesideType.small.className, 'font-normal')}>
            {dueWords(props.chosen, open.length)}
          </span>
        </Button>
      </div>
    </form>
  )
}

function dueWords(chosen: PieceDto | null, openCount: number): string {
  if (chosen === null) return 'choose a barrel first'
  if (openCount === 0) return `${chosen.serial}, ${chosen.recipe.name}`
  return openCount === 1 ? 'one more to tick' : `${openCount} more to tick`
}

function StartTick({
  item,
  isTicked,
  isMissing,
  onToggle,
}: {
  item: StartItem
  isTicked: boolean
  isMissing: boolean
  onToggle: () => void
}) {
  return (
    <label className="flex min-h-[85px] cursor-pointer touch-manipulation items-center gap-4 border-b border-line py-1 active:bg-wash">
      <input
        type="checkbox"
        checked={isTicked}
        onChange={onToggle}
        aria-invalid={isMissing || undefined}
        className={classNames('size-[44px] shrink-0 accent-water', isMissing && 'outline-3 outline-amber')}
      />
      <span className="min-w-0">
        <span
          className={classNames('block text-[24px] leading-[1.15]', item.isWrong && 'font-[640] text-amber')}
        >
          {item.words}
        </span>
        {item.more === '' ? null : (
          <span className={classNames(firesideType.small.className, 'block text-soft')}>{item.more}</span>
        )}
      </span>
    </label>
  )
}
