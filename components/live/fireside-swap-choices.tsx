'use client'

import { useState } from 'react'
import type { ReactNode } from 'react'
import { Button } from '@/components/ui/button'
import { classNames } from '@/components/ui/class-names'
import type { FiringDto } from '@/lib/firings/schema'
import type { ProbeDto } from '@/lib/probes/schema'
import { placeWords } from './room-start-list'

type Current = FiringDto['probes'][number]

export type SwapChoice = {
  role: Current['role']
  probeId: string
  isAtSamePlace: boolean
  minutesAgo: number
}

const minutes = [0, 1, 2, 5] as const

/** Which probe comes out, which goes in, and where that sits; each a touch. */
export function SwapChoices({
  current,
  spare,
  isBusy,
  onSwap,
  onClose,
}: {
  current: readonly Current[]
  /** In use and reading no firing; null until they are known. */
  spare: readonly ProbeDto[] | null
  isBusy: boolean
  onSwap: (choice: SwapChoice) => void
  onClose: () => void
}) {
  const [role, setRole] = useState<Current['role'] | null>(
    current.length === 1 ? (current[0]?.role ?? null) : null,
  )
  const [probeId, setProbeId] = useState<string | null>(null)
  const [isAtSamePlace, setIsAtSamePlace] = useState<boolean | null>(null)
  const [minutesAgo, setMinutesAgo] = useState(0)
  const out = current.find((probe) => probe.role === role)
  const into = spare?.find((probe) => probe.id === probeId)
  const isReady = out !== undefined && into !== undefined && isAtSamePlace !== null
  return (
    <div className="grid gap-4">
      <Choice title="Comes out">
        {current.map((probe) => (
          <Touch key={probe.role} isOn={probe.role === role} onTouch={() => setRole(probe.role)}>
            {probe.role}: {probe.name}
          </Touch>
        ))}
      </Choice>
      <Choice title="Goes in">
        {spare === null ? <p className="text-soft">Asking which probes are free.</p> : null}
        {spare?.length === 0 ? (
          <p className="text-amber">No probe is free. An administrator adds a spare on the page Probes.</p>
        ) : null}
        {spareFirst(spare ?? []).map((probe) => (
          <Touch key={probe.id} isOn={probe.id === probeId} onTouch={() => setProbeId(probe.id)}>
            {probe.name}
            {probe.hearth === null ? '' : `, hearth ${probe.hearth.number}`}
          </Touch>
        ))}
      </Choice>
      {into !== undefined && role === 'lead' && into.leadFaults.length > 0 ? (
        <p className="text-amber">{into.leadFaults.join(' ')}</p>
      ) : null}
      {out === undefined || into === undefined ? null : (
        <Choice title="And sits">
          <Touch isOn={isAtSamePlace === true} onTouch={() => setIsAtSamePlace(true)}>
            in the same place: {placeWords(out)}
          </Touch>
          <Touch isOn={isAtSamePlace === false} onTouch={() => setIsAtSamePlace(false)}>
            elsewhere: {placeWords(into.place)}
          </Touch>
        </Choice>
      )}
      {isAtSamePlace === false && role === 'lead' ? (
        <p className="text-amber">
          Another place is another curve: the firing goes on, and it will not be scored.
        </p>
      ) : null}
      <Choice title="Swapped">
        {minutes.map((count) => (
          <Touch key={count} isOn={count === minutesAgo} onTouch={() => setMinutesAgo(count)}>
            {count === 0 ? 'now' : `${count} min ago`}
          </Touch>
        ))}
      </Choice>
      <div className="mt-2 flex flex-wrap items-center justify-between gap-3">
        <Button onClick={onClose} disabled={isBusy}>
          Leave it
        </Button>
        <p className="text-soft">A swap is not undone: swap back instead.</p>
        <Button
          kind={isReady ? 'due' : 'main'}
          disabled={!isReady}
          isBusy={isBusy}
          onClick={() => {
            if (role !== null && probeId !== null && isAtSamePlace !== null)
              onSwap({ role, probeId, isAtSamePlace, minutesAgo })
          }}
        >
          Swap
        </Button>
      </div>
    </div>
  )
}

/** Spares before the probes of hearths that stand free. */
function spareFirst(probes: readonly ProbeDto[]): ProbeDto[] {
  const wood = probes.filter((probe) => probe.retiredAt === null)
  return [
    ...wood.filter((probe) => probe.usualRole === 'spare'),
    ...wood.filter((probe) => probe.usualRole !== 'spare'),
  ]
}

function Choice({ title, children }: { title: string; children: ReactNode }) {
  return (
    <fieldset className="min-w-0">
      <legend className="mb-1 text-soft">{title}</legend>
      <div className="flex flex-wrap gap-3">{children}</div>
    </fieldset>
  )
}

function Touch({ isOn, onTouch, children }: { isOn: boolean; onTouch: () => void; children: ReactNode }) {
  return (
    <Button
      aria-pressed={isOn}
      className={classNames(isOn && 'border-water! bg-wash font-[640]')}
      onClick={onTouch}
    >
      {children}
    </Button>
  )
}
