import type { ThermocoupleType } from '@/lib/science/thermocouple'
import type { DemoGateway } from './demo-file'
import {
  followFiring,
  isLivePhase,
  lastReadingMs,
  phaseStartMs,
  type FollowedFiring,
} from './followed-firing'
import type { HearthProbe, HearthReading } from './hearth'
import { createIdleHearth, type IdleHearth } from './idle'
import type { OwnFirings } from './own-firings'
import { ServerRefusal, type ServerView, type ViewedHearth } from './server-view'

/*
 * The hearths of a room as the simulator keeps them: each either idle or under a firing that the server knows. Only
 * firings of its own does the simulator mark, finish and replace by the next rose.
 */

export type Room = {
  /** Readings due at this instant, by hearth number. */
  tick: (nowMs: number) => Map<number, HearthReading[]>
  /** Looks at the server once: which firings stand where, and what was done to them. */
  look: (nowMs: number) => Promise<void>
}

type Place = {
  number: number
  thermocoupleTypes: Partial<Record<HearthProbe, ThermocoupleType>>
  firing: FollowedFiring | null
  /** False until the server was asked: a hearth that may stand under a fire is never read as if it were cold. */
  isKnown: boolean
  idle: IdleHearth
  idleReadMs: number
  freeSinceMs: number
}

type Options = {
  view: ServerView
  own: OwnFirings
  gateways: readonly DemoGateway[]
  say: (sentence: string) => void
  skill?: number
  /** How long a kept hearth stands empty before the next rose. */
  pauseMs?: number
}

const IDLE_EVERY_MS = 1_000
const DEFAULT_PAUSE_MS = 120_000
/** After a longer silence a firing is beyond saving (its gap is longer than any score allows). */
const LONGEST_SILENCE_MS = 600_000
const USUAL_MOISTURE_PERCENT = 19

export function createRoom(options: Options): Room {
  const { view, own, say, skill = 0.85, pauseMs = DEFAULT_PAUSE_MS } = options
  const places = new Map(placesOf(options.gateways).map((place) => [place.number, place]))

  const release = (place: Place, nowMs: number) => {
    const startTempC = place.firing?.woodTempC()
    place.firing = null
    place.freeSinceMs = nowMs
    place.idle = createIdleHearth({
      seed: place.number,
      thermocoupleTypes: place.thermocoupleTypes,
      ...(startTempC === undefined ? {} : { startTempC }),
    })
  }
  const attach = async (place: Place, firingId: string, nowMs: number) => {
    const firing = await view.getFiring(firingId)
    if (!isLivePhase(firing.state)) return
    const readings = await view.getReadings(firingId, 600)
    const isOwn = own.isOwn(firing)
    if (isOwn) own.addFiring(firingId, place.number)
    const silentSinceMs = lastReadingMs(readings) ?? phaseStartMs(firing)
    if (isOwn && nowMs - silentSinceMs > LONGEST_SILENCE_MS) {
      await view.abandonFiring(firingId, 'Demonstration: nobody read the probes while the simulator was off.')
      return
    }
    const { thermocoupleTypes } = place
    place.firing = followFiring({ view, firing, readings, isOwn, skill, thermocoupleTypes, nowMs, say })
    say(
      `hearth ${place.number}: ${firing.state}, ${isOwn ? 'tended by the virtual toaster' : 'led from the console'}`,
    )
  }
  const settle = async (place: Place, hearth: ViewedHearth | undefined, nowMs: number) => {
    const liveId = hearth?.live?.firingId ?? null
    if (place.firing !== null && place.firing.firingId !== liveId) release(place, nowMs)
    if (liveId !== null && place.firing === null) await attach(place, liveId, nowMs)
    else await place.firing?.synchronise()
    place.isKnown = true
  }
  const startNext = async (place: Place, hearthId: string, nowMs: number) => {
    // Whatever comes of it, the next try is a pause away.
    place.freeSinceMs = nowMs
    for (const pieceId of await view.listWaitingPieceIds()) {
      try {
        const firingId = await view.startFiring(pieceId, hearthId, USUAL_MOISTURE_PERCENT)
        own.addFiring(firingId, place.number)
        return
      } catch (error) {
        // 422: this rose does not suit this hearth (its probe sits elsewhere, it is over a fire already): the next.
        if (!(error instanceof ServerRefusal) || error.status !== 422) throw error
      }
    }
    say(`hearth ${place.number}: no rose in the queue suits it; it stays empty`)
  }

  return {
    tick: (nowMs) => {
      const readings = new Map<number, HearthReading[]>()
      for (const place of places.values()) {
        if (!place.isKnown) continue
        const due = place.firing === null ? readIdle(place, nowMs) : place.firing.advanceTo(nowMs)
        if (due.length > 0) readings.set(place.number, due)
      }
      return readings
    },
    look: async (nowMs) => {
      const hearths = await view.listHearths()
      for (const place of places.values()) {
        const hearth = hearths.find((one) => one.number === place.number)
        await settle(place, hearth, nowMs)
        const isDue = nowMs - place.freeSinceMs > pauseMs && own.keptHearths().includes(place.number)
        const isFree =
          hearth !== undefined && hearth.isActive && hearth.live === null && place.firing === null
        if (isDue && isFree) await startNext(place, hearth.id, nowMs)
      }
    },
  }
}

function placesOf(gateways: readonly DemoGateway[]): Place[] {
  return gateways.flatMap((gateway) =>
    gateway.hearths.map((number) => {
      const probes = gateway.probes.filter((probe) => probe.hearth === number)
      const thermocoupleTypes = Object.fromEntries(
        probes.map((probe) => [probe.role, probe.thermocoupleType]),
      )
      return {
        number,
        thermocoupleTypes,
        firing: null,
        isKnown: false,
        idle: createIdleHearth({ seed: number, thermocoupleTypes }),
        idleReadMs: 0,
        freeSinceMs: 0,
      }
    }),
  )
}

function readIdle(place: Place, nowMs: number): HearthReading[] {
  const sinceMs = nowMs - place.idleReadMs
  if (sinceMs < IDLE_EVERY_MS - 20) return []
  place.idleReadMs = nowMs
  const dtS = Math.min(sinceMs, 60_000) / 1_000
  return place.idle.advance(dtS).readings.map((reading) => ({ ...reading, timeS: nowMs / 1_000 }))
}
