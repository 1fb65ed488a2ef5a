import type { firingStates } from '@/lib/live/events'

export type FiringState = (typeof firingStates)[number]

/** The allowed moves between firing states (mirrored by firing_moves in the database). */
export const firingMoves: Record<FiringState, readonly FiringState[]> = {
  queued: ['preheating', 'abandoned'],
  preheating: ['bending', 'toasting', 'abandoned'],
  bending: ['toasting', 'abandoned'],
  toasting: ['resting', 'finished', 'abandoned'],
  resting: ['finished', 'abandoned'],
  finished: [],
  abandoned: [],
}

export function canMove(from: FiringState, to: FiringState): boolean {
  return firingMoves[from].includes(to)
}

export function isLive(state: FiringState): boolean {
  return state === 'preheating' || state === 'bending' || state === 'toasting' || state === 'resting'
}
