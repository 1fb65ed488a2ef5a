'use client'

import { useEffect, useMemo, useRef } from 'react'
import { Pair } from '@/components/chart/pair'
import type { PairHandle, PairProps } from '@/components/chart/pair-types'
import type { TemperatureUnit } from '@/lib/format'
import type { FiresideFacts } from './fireside-facts'
import { nothingTaken, takeFrom, takenAll } from './fireside-feed'
import { toFuture, toPairMarks, toPairReadings, toPairStages, toPairWood } from './fireside-pair-data'
import type { LiveFiring } from './use-live-firing'

const noReadings = { timeS: [], tempC: [] }
const roles = ['lead', 'opposite'] as const

/**
 * The live pair: plan band, both probes, marks on the seam, and the wood beneath. Readings go to the picture without
 * a render of it. Another epoch of the server is another picture: give it another key.
 */
export function FiresideChart({
  facts,
  live,
  stagePosition,
  cutNowMs,
  unit,
}: {
  facts: FiresideFacts
  live: LiveFiring
  stagePosition: number | null
  /** Set while the server is not heard: the moment goes on, without a head and without a future. */
  cutNowMs: number | null
  unit: TemperatureUnit
}) {
  const pair = useRef<PairHandle>(null)
  const taken = useRef({ lead: nothingTaken, opposite: nothingTaken })
  const { plan, content, toastMs, shownMarks, serial, hearthNumber } = facts
  const { columns, state } = live
  const props: PairProps = useMemo(
    () => ({
      size: 'large',
      title: `Barrel ${serial}, hearth ${hearthNumber ?? 'none'}`,
      planBand: plan.band,
      stages: toPairStages(plan, stagePosition),
      lead: { name: 'lead', ...noReadings },
      second: { name: 'opposite', ...noReadings },
      marks: toastMs === null ? [] : toPairMarks(shownMarks, toastMs),
      wood: toPairWood(columns),
      nowS: null,
      xMaxS: plan.totalS,
      unit,
    }),
    [serial, hearthNumber, plan, stagePosition, shownMarks, toastMs, columns, unit],
  )

  // A picture made anew holds nothing yet.
  useEffect(() => {
    taken.current = { lead: nothingTaken, opposite: nothingTaken }
  }, [])
  // After every render, since feeds grow in place: what they grew by goes to the picture.
  useEffect(() => {
    const handle = pair.current
    const feeds = live.feeds()
    if (handle === null || feeds === null || toastMs === null) return
    for (const role of roles) {
      const from = takeFrom(feeds[role], taken.current[role])
      if (from === null) continue
      taken.current[role] = takenAll(feeds[role])
      handle.push(toPairReadings(feeds[role], from, toastMs, role))
    }
  })
  useEffect(() => {
    if (state === null || state.toastS === null) return
    pair.current?.setNow(state.toastS)
    pair.current?.setFuture(toFuture(state, content.limits.woodMaximumC))
  }, [state, content.limits.woodMaximumC])
  useEffect(() => {
    if (cutNowMs === null || toastMs === null) return
    pair.current?.setNow((cutNowMs - toastMs) / 1000)
    pair.current?.setFuture(null)
  }, [cutNowMs, toastMs])

  return <Pair {...props} ref={pair} className="h-full" />
}
