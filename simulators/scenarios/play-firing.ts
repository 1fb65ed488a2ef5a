import { randomUUID } from 'node:crypto'
import type { PersonActor } from '@/lib/auth/actor'
import { abandonFiring } from '@/lib/firings/abandon-firing'
import { addMark } from '@/lib/firings/add-mark'
import { finishFiring } from '@/lib/firings/finish-firing'
import type { FiringDto, HandMarkKind } from '@/lib/firings/schema'
import { startFiring } from '@/lib/firings/start-firing'
import type { IngestMessage } from '@/lib/gateway/protocol'
import { MAX_READINGS_PER_MESSAGE } from '@/lib/gateway/protocol'
import { storeReadings } from '@/lib/ingest/store-readings'
import type { GatewayIdentity } from '@/lib/ingest/verify-device-token'
import type { RecipeContent } from '@/lib/recipes/schema'
import { setClock } from '@/lib/runtime'
import type { HearthMark, HearthOptions, HearthProbe, HearthReading } from '@/simulators/hearth/hearth'
import { createHearth } from '@/simulators/hearth/hearth'
import { hearthRecipeOf } from '@/simulators/hearth/recipe-of-content'

/** A gateway as the seed speaks for it: its boot and the next number. */
export type SeedGateway = { identity: GatewayIdentity; bootId: string; nextSeq: number }

export type SeedFiring = {
  pieceId: string
  hearthId: string
  toaster: PersonActor
  startAt: Date
  content: RecipeContent
  gateway: SeedGateway
  probeIds: Record<HearthProbe, string>
  engine: Omit<HearthOptions, 'recipe'>
  /** Readings that the gateway's log lacks, in seconds from toast start: a cut cable, a gateway without power. */
  gap?: { fromToastS: number; forS: number }
  /** Stop so many seconds after toast start, leaving the firing live; or abandon it there with the reason. */
  stopAtToastS?: number
  abandonReason?: string
  finish?: { colour: string; smell: string; outsideTempC: number; remarks: string }
}

export type Played = { readings: HearthReading[]; marks: HearthMark[]; endS: number; toastS: number | null }

/** Runs the engine at one reading a second, to the end or to the stop. */
export function playEngine(firing: SeedFiring): Played {
  const hearth = createHearth({ ...firing.engine, recipe: hearthRecipeOf(firing.content) })
  const played: Played = { readings: [], marks: [], endS: 0, toastS: null }
  while (hearth.phase() !== 'finished') {
    const step = hearth.advance(1)
    for (const mark of step.marks) {
      played.marks.push(mark)
      if (mark.kind === 'phase' && mark.phase === 'toasting') played.toastS = mark.timeS
    }
    const timeS = hearth.timeS()
    if (!isCut(firing, played.toastS, timeS)) played.readings.push(...step.readings)
    played.endS = timeS
    const stop = firing.stopAtToastS
    if (stop !== undefined && played.toastS !== null && timeS - played.toastS >= stop) break
  }
  return played
}

function isCut(firing: SeedFiring, toastS: number | null, timeS: number): boolean {
  if (firing.gap === undefined || toastS === null) return false
  const sinceToastS = timeS - toastS
  return sinceToastS >= firing.gap.fromToastS && sinceToastS < firing.gap.fromToastS + firing.gap.forS
}

/** How long a barrel of the demo takes over the fire when nothing is known yet, s: to plan the day's starts. */
export function plannedFiringS(content: RecipeContent): number {
  const toastMinutes = content.stages.reduce((sum, stage) => sum + stage.minutes, 0)
  return (content.preheat.minutes + content.bend.minimumMinutes + toastMinutes + content.restMinutes) * 60
}

/** One firing from start to end through the verbs a toaster and a gateway use, each at its own instant of the past. */
export async function playFiring(firing: SeedFiring): Promise<{ firing: FiringDto; endAt: Date }> {
  const at = (timeS: number) => new Date(firing.startAt.getTime() + Math.round(timeS * 1000))
  const clockAt = (instant: Date) => setClock(() => instant.getTime())
  clockAt(firing.startAt)
  const started = await startFiring(firing.toaster, {
    pieceId: firing.pieceId,
    hearthId: firing.hearthId,
    moisturePercent: firing.engine.moisturePercent ?? 18,
    moistureMethod: 'meter',
    isTrial: false,
    isStartListDone: true,
    at: firing.startAt.toISOString(),
  })
  const played = playEngine(firing)
  for (const mark of played.marks) {
    if (mark.kind === 'phase' && (mark.phase === 'finished' || mark.phase === 'preheating')) continue
    clockAt(at(mark.timeS))
    await addMark(firing.toaster, {
      firingId: started.id,
      id: randomUUID(),
      at: at(mark.timeS).toISOString(),
      ...toMark(mark),
    })
  }
  const endAt = at(played.endS)
  clockAt(endAt)
  await sendReadings(firing, played.readings, at)
  return { firing: await endFiring(firing, started, endAt), endAt }
}

async function endFiring(firing: SeedFiring, started: FiringDto, endAt: Date): Promise<FiringDto> {
  const when = { id: started.id, at: endAt.toISOString() }
  if (firing.abandonReason !== undefined) {
    return abandonFiring(firing.toaster, { ...when, reason: firing.abandonReason })
  }
  if (firing.stopAtToastS !== undefined) return started
  const words = firing.finish ?? { colour: '', smell: '', outsideTempC: 60, remarks: '' }
  return finishFiring(firing.toaster, {
    ...when,
    colour: words.colour === '' ? null : words.colour,
    smell: words.smell === '' ? null : words.smell,
    outsideTempC: words.outsideTempC,
    remarks: words.remarks,
  })
}

type MarkFields = {
  kind: HandMarkKind
  phase?: 'bending' | 'toasting' | 'resting'
  stagePosition?: number
  words: string
}

/** The engine says which stage begins (from 0); the mark says which stage ended (from 1): the same number. */
export function toMark(mark: HearthMark): MarkFields {
  if (mark.kind === 'stage') return { kind: 'stage', stagePosition: mark.stageIndex, words: '' }
  if (mark.kind !== 'phase') return { kind: mark.kind, words: '' }
  if (mark.phase === 'bending' || mark.phase === 'toasting' || mark.phase === 'resting') {
    return { kind: 'phase', phase: mark.phase, words: '' }
  }
  throw new RangeError(`mark: a firing is not marked ${mark.phase}`)
}

async function sendReadings(
  firing: SeedFiring,
  readings: readonly HearthReading[],
  at: (timeS: number) => Date,
): Promise<void> {
  const { gateway, probeIds } = firing
  for (let from = 0; from < readings.length; from += MAX_READINGS_PER_MESSAGE) {
    const part = readings.slice(from, from + MAX_READINGS_PER_MESSAGE)
    const message: IngestMessage = {
      bootId: gateway.bootId,
      sentAt: at(part.at(-1)?.timeS ?? 0).toISOString(),
      readings: part.map((reading) => ({
        seq: gateway.nextSeq++,
        probeId: probeIds[reading.probe],
        at: at(reading.timeS).toISOString(),
        emf: reading.emf,
        ...(reading.flag === undefined ? {} : { flag: reading.flag }),
      })),
    }
    const answer = await storeReadings(gateway.identity, message)
    if (answer.refused.length > 0) {
      throw new Error(
        `The seed's reading ${answer.refused[0]?.seq} was refused: ${answer.refused[0]?.reason}`,
      )
    }
  }
}
