'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import useSWR from 'swr'
import type { Problem } from '@/components/ui/problem'
import type { PieceDto } from '@/lib/batches/schema'
import type { FiringDto } from '@/lib/firings/schema'
import type { TemperatureUnit } from '@/lib/format'
import { apiPath, callApi, getApi, isApiProblem, problemOf } from '@/lib/http/api-client'
import type { Page } from '@/lib/http/cursor'
import type { HearthDto, ProbeDto, WaterCheckDto } from '@/lib/probes/schema'
import type { RecipeVersionDto } from '@/lib/recipes/schema'
import { RoomStartForm } from './room-start-form'
import type { StartChoice } from './room-start-form'
import { startItems } from './room-start-list'
import { RoomStartWater } from './room-start-water'
import { useNextPieceLine } from './use-room-memory'
import { useScannedPiece } from './use-scanned-piece'

export type RoomStartConsoleProps = {
  hearth: HearthDto
  queue: PieceDto[]
  probes: ProbeDto[]
  /** The newest check of each source, the one checked last first. */
  waters: WaterCheckDto[]
  zone: string
  /** What today's record says of carbon monoxide. */
  carbonMonoxideLine?: string
  unit: TemperatureUnit
  /** Of the barrel that was scanned in the room; null for the next of the queue. */
  scannedSerial?: string | null
  /** A chemist fires trials only. */
  isTrial: boolean
}

/** The start of a firing: fetches the recipe of the chosen barrel, sends, and goes to the fireside. */
export function RoomStartConsole(props: RoomStartConsoleProps) {
  const { hearth, queue, probes, waters, zone, unit, isTrial } = props
  const router = useRouter()
  const [search, setSearch] = useState('')
  const [water, setWater] = useState<WaterCheckDto | null>(waters[0] ?? null)
  const [isAgain, setIsAgain] = useState(false)
  const [picked, setPicked] = useState<PieceDto | null>(null)
  const scanned = useScannedPiece(queue, props.scannedSerial ?? null, () => {
    setPicked(null)
    setSearch('')
  })
  const chosen = picked ?? scanned.piece ?? queue[0] ?? null
  const [isBusy, setIsBusy] = useState(false)
  const [problem, setProblem] = useState<Problem | null>(null)
  const [asksOverride, setAsksOverride] = useState(false)
  const found = useSWR(
    search.trim() === '' && !isAgain
      ? null
      : apiPath('/api/barrels', {}, { show: isAgain ? 'again' : 'waiting', limit: 20, q: search.trim() }),
    getApi<Page<PieceDto>>,
    { keepPreviousData: true },
  )
  const version = useSWR(
    chosen === null ? null : apiPath('/api/recipe-versions/{id}', { id: chosen.recipe.versionId }),
    getApi<RecipeVersionDto>,
  )
  const nextLine = useNextPieceLine(chosen?.id ?? null, unit)
  const lead = probes.find((probe) => probe.usualRole === 'lead') ?? null

  const choose = (piece: PieceDto) => {
    setPicked(piece)
    setSearch('')
    setProblem(null)
  }
  const start = async (choice: StartChoice) => {
    if (chosen === null) return
    setIsBusy(true)
    try {
      const firing = await callApi<FiringDto>('POST', '/api/firings', {
        body: {
          pieceId: chosen.id,
          hearthId: hearth.id,
          isTrial,
          isStartListDone: true,
          waterSource: water?.source,
          ...choice,
        },
      })
      router.push(`/fireside/${firing.id}`)
    } catch (error) {
      setProblem(problemOf(error))
      if (isApiProblem(error) && 'override' in error.problem.fields) setAsksOverride(true)
      setIsBusy(false)
    }
  }

  return (
    <RoomStartForm
      hearthNumber={hearth.number}
      pieces={search.trim() === '' && !isAgain ? queue : (found.data?.items ?? [])}
      isAgain={isAgain}
      onAgain={setIsAgain}
      nextLine={nextLine}
      isSearching={found.isLoading}
      search={search}
      onSearch={setSearch}
      chosen={chosen}
      onChoose={choose}
      scanWords={scanned.words}
      content={version.data?.content ?? null}
      probes={probes}
      lead={lead}
      waterChoice={<RoomStartWater waters={waters} chosen={water} onChoose={setWater} />}
      items={startItems(water, lead, zone, props.carbonMonoxideLine)}
      isTrial={isTrial}
      isBusy={isBusy}
      problem={problem}
      asksOverride={asksOverride}
      onStart={(choice) => void start(choice)}
    />
  )
}
