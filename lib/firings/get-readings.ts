import type * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { forkEm } from '@/lib/db/orm'
import { getFiring } from '@/lib/firings/get-firing'
import type { firingReadingsSchema, readingsQuery } from '@/lib/firings/schema'
import { checkReadings } from '@/lib/ingest/checked-readings'
import type { FiringSeries } from '@/lib/ingest/firing-readings'
import { firingReadings } from '@/lib/ingest/firing-readings'
import { downsampleKeepingExtremes } from '@/lib/science/curve'
import { siteOfVersion } from '@/lib/site/current-site'

export type FiringReadingsDto = z.infer<typeof firingReadingsSchema>

type Input = z.infer<typeof readingsQuery> & { id: string }

function cut(series: FiringSeries, fromMs: number, toMs: number): { atMs: number[]; tempC: number[] } {
  const atMs: number[] = []
  const tempC: number[] = []
  series.atMs.forEach((at, i) => {
    if (at < fromMs || at > toMs) return
    atMs.push(at)
    tempC.push(series.tempC[i] ?? Number.NaN)
  })
  return { atMs, tempC }
}

/** A firing's curves in °C as they are believed (what was stuck or jumped is none), on seconds from toast start (preheat start while there is no toast). */
export async function getReadings(actor: Actor, input: Input): Promise<FiringReadingsDto> {
  const firing = await getFiring(actor, input)
  const zeroAt = firing.toastAt ?? firing.preheatAt ?? firing.queuedAt
  const zeroMs = Date.parse(zeroAt)
  const em = await forkEm()
  const { rules } = await siteOfVersion(em, firing.siteSettingsVersion ?? 1)
  const { sealRevision, series } = checkReadings(await firingReadings(em, firing.id), rules.signals)
  return {
    firingId: firing.id,
    zeroAt,
    isSealed: sealRevision !== null,
    series: series.map((one) => {
      const { atMs, tempC } = cut(
        one,
        input.from === undefined ? -Infinity : Date.parse(input.from),
        input.to === undefined ? Infinity : Date.parse(input.to),
      )
      const timeS = atMs.map((at) => (at - zeroMs) / 1000)
      const shown =
        input.points === undefined || timeS.length <= input.points
          ? { times: timeS, values: tempC }
          : downsampleKeepingExtremes(timeS, tempC, Math.max(2, Math.floor(input.points / 4)))
      return {
        role: one.role,
        probeId: one.assignments.at(-1)?.probeId ?? '',
        name: one.assignments.at(-1)?.probeName ?? one.role,
        readingCount: atMs.length,
        timeS: Array.from(shown.times),
        tempC: Array.from(shown.values, (value) =>
          Number.isNaN(value) ? null : Math.round(value * 1000) / 1000,
        ),
      }
    }),
  }
}
