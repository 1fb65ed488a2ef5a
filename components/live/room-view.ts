import type { RoomFiring } from '@/lib/live/events'
import { inSentence } from './fireside-figures'

/** What a row says of the time: the stage's or phase's seconds left, and what comes next. */
export type RoomTime = { leftS: number | null; isOver: boolean; words: string }

const phaseNames = { preheating: 'Preheat', bending: 'Bend', resting: 'Rest' } as const

/** Counts on between two states of the server, so that the clock does not stutter; never shows what it does not know. */
export function roomTime(firing: RoomFiring, nowMs: number): RoomTime {
  const sinceS = Math.max(0, (nowMs - firing.atMs) / 1000)
  const name = firing.stage?.name ?? phaseName(firing.state)
  const atThenS = firing.stage?.leftS ?? firing.next.dueInS
  const leftS = atThenS === null ? null : atThenS - sinceS
  const next = firing.next.words === 'Nothing to do' ? 'nothing to do' : inSentence(firing.next.words)
  return {
    leftS: leftS === null ? null : Math.abs(leftS),
    isOver: leftS !== null && leftS < 0,
    words: `${name}, ${next}`,
  }
}

function phaseName(state: RoomFiring['state']): string {
  return state === 'preheating' || state === 'bending' || state === 'resting' ? phaseNames[state] : 'Toast'
}

/** The edge of a row: the worst that is wrong with it. */
export function roomEdge(
  firing: RoomFiring | null,
  isFar: boolean,
  isKnownNow: boolean,
): 'red' | 'amber' | null {
  if (firing?.alarm?.level === 'red') return 'red'
  return firing?.alarm?.level === 'amber' || isFar || !isKnownNow ? 'amber' : null
}
