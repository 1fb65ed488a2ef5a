import type { PairMark, PairProps, PairStage, PairWood } from '@/components/chart/pair-types'
import type { FiringState } from '@/lib/live/events'
import type { Plan } from '@/lib/recipes/plan-of'
import type { ShownMark } from './fireside-facts'
import type { StaveColumn } from './live-firing-client'
import type { PointFeed } from './point-feed'

export type PairReading = { timeS: number; leadC?: number | null; secondC?: number | null }

/** A silence longer than this is drawn as a gap: what is unknown is never a line. */
const SILENCE_S = 5

/**
 * A feed's points from `from` on as the picture takes them, in seconds from the toast start. Just behind the last
 * point before a silence stands a point without reading, which breaks the line.
 */
export function toPairReadings(
  feed: Pick<PointFeed, 'length' | 'atMs' | 'tempC'>,
  from: number,
  toastMs: number,
  role: 'lead' | 'opposite',
): PairReading[] {
  const atMs = feed.atMs()
  const temps = feed.tempC()
  const readings: PairReading[] = []
  const add = (timeS: number, tempC: number | null) => {
    if (timeS >= 0) readings.push(role === 'lead' ? { timeS, leadC: tempC } : { timeS, secondC: tempC })
  }
  for (let i = from; i < feed.length; i += 1) {
    const timeS = ((atMs[i] ?? 0) - toastMs) / 1000
    const beforeS = i === 0 ? timeS : ((atMs[i - 1] ?? 0) - toastMs) / 1000
    if (timeS - beforeS > SILENCE_S) add(beforeS + 0.001, null)
    const temp = temps[i] ?? NaN
    add(timeS, Number.isNaN(temp) ? null : temp)
  }
  return readings
}

export function toPairWood(columns: readonly StaveColumn[]): PairWood | null {
  const first = columns[0]
  if (first === undefined) return null
  return {
    timesS: columns.map((column) => column.atS),
    depthsMm: first.depthsMm,
    log10Dose: columns.flatMap((column) => column.log10Dose),
    isotherm100Mm: columns.map((column) => column.isotherm100Mm),
    isotherm150Mm: columns.map((column) => column.isotherm150Mm),
    toastDepthMm: columns.map((column) => column.toastDepthMm),
  }
}

export function toPairStages(plan: Plan, position: number | null): PairStage[] {
  return plan.stages.map((stage) => ({
    name: stage.name,
    startS: stage.startS,
    endS: stage.endS,
    isCurrent: position !== null && stage.index === position - 1,
  }))
}

const onSeam = ['stir', 'feed', 'mist', 'lid on', 'lid off', 'turn', 'turn over', 'note'] as const

/** Marks of hands, in words; a note is only said to be there. */
export function toPairMarks(marks: readonly ShownMark[], toastMs: number): PairMark[] {
  return marks.flatMap((mark) => {
    const words = onSeam.find((kind) => kind === mark.kind)
    const timeS = (mark.atMs - toastMs) / 1000
    return words === undefined || timeS < 0 ? [] : [{ timeS, words }]
  })
}

/** How far ahead the present climb is drawn, s. */
const AHEAD_S = 480

/** What the present climb leads to, dashed, never above the wood's limit; nothing without a fresh reading. */
export function toFuture(state: FiringState, woodMaximumC: number): PairProps['future'] {
  const { toastS, woodTempC, climbCPerMin } = state
  if (state.state !== 'toasting' || toastS === null || woodTempC === null || climbCPerMin === null)
    return null
  const aheadC = woodTempC + (climbCPerMin * AHEAD_S) / 60
  if (climbCPerMin <= 0 || aheadC <= woodMaximumC) {
    return { timeS: [toastS, toastS + AHEAD_S], tempC: [woodTempC, Math.max(0, aheadC)] }
  }
  const untilS = Math.max(0, ((woodMaximumC - woodTempC) / climbCPerMin) * 60)
  return { timeS: [toastS, toastS + untilS], tempC: [woodTempC, woodTempC + (climbCPerMin * untilS) / 60] }
}
