'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import useSWR from 'swr'
import type { Problem } from '@/components/ui/problem'
import type { PieceDto } from '@/lib/batches/schema'
import type { FiringDto } from '@/lib/firings/schema'
import { apiPath, callApi, getApi, isApiProblem, problemOf } from '@/lib/http/api-client'
import type { Page } from '@/lib/http/cursor'
import type { HearthDto, ProbeDto, WaterCheckDto } from '@/lib/probes/schema'
import type { RecipeVersionDto } from '@/lib/recipes/schema'
import { RoomStartForm } from './room-start-form'
import type { StartChoice } from './room-start-form'
import { startItems } from './room-start-list'

export type RoomStartConsoleProps = {
  hearth: HearthDto
  queue: PieceDto[]
  probes: ProbeDto[]
  water: WaterCheckDto | null
  zone: string
  /** A chemist fires trials only. */
  isTrial: boolean
}

/** The start of a firing: fetches the recipe of the chosen barrel, sends, and goes to the fireside. */
export function RoomStartConsole({ hearth, queue, probes, water, zone, isTrial }: RoomStartConsoleProps) {
  const router = useRouter()
  const [search, setSearch] = useState('')
  const [chosen, setChosen] = useState<PieceDto | null>(queue[0] ?? null)
  const [isBusy, setIsBusy] = useState(false)
  const [problem, setProblem] = useState<Problem | null>(null)
  const [asksOverride, setAsksOverride] = useState(false)
  const found = useSWR(
    search.trim() === ''
      ? null
      : apiPath('/api/barrels', {}, { show: 'waiting', limit: 20, q: search.trim() }),
    getApi<Page<PieceDto>>,
    { keepPreviousData: true },
  )
  const version = useSWR(
    chosen === null ? null : apiPath('/api/recipe-versions/{id}', { id: chosen.recipe.versionId }),
    getApi<RecipeVersionDto>,
  )
  const lead = probes.find((probe) => probe.usualRole === 'lead') ?? null

  const start = async (choice: StartChoice) => {
    if (chosen === null) return
    setIsBusy(true)
    try {
      const firing = await callApi<FiringDto>('POST', '/api/firings', {
        body: { pieceId: chosen.id, hearthId: hearth.id, isTrial, isStartListDone: true, ...choice },
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
      pieces={search.trim() === '' ? queue : (found.data?.items ?? [])}
      isSearching={found.isLoading}
      search={search}
      onSearch={setSearch}
      chosen={chosen}
      onChoose={(piece) => {
        setChosen(piece)
        setProblem(null)
      }}
      content={version.data?.content ?? null}
      probes={probes}
      lead={lead}
      items={startItems(water, lead, zone)}
      isTrial={isTrial}
      isBusy={isBusy}
      problem={problem}
      asksOverride={asksOverride}
      onStart={(choice) => void start(choice)}
    />
  )
}
