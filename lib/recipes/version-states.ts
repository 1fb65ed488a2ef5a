import { AppError } from '@/lib/errors'
import type { VersionState } from '@/lib/recipes/schema'

export type VersionMove = { from: readonly VersionState[]; to: VersionState; refusal: string }

/**
 * The allowed moves of a recipe version, by verb; `recipe_version_moves` in the database holds the same pairs. What
 * is not here is forbidden: nothing leaves withdrawn, and approved never becomes a draft again.
 */
export const versionMoves = {
  'send for review': {
    from: ['draft'],
    to: 'in review',
    refusal: 'Only a draft can be sent for review.',
  },
  'take back': {
    from: ['in review'],
    to: 'draft',
    refusal: 'Only a version that is in review can be taken back.',
  },
  return: { from: ['in review'], to: 'draft', refusal: 'Only a version that is in review can be returned.' },
  approve: {
    from: ['in review'],
    to: 'approved',
    refusal: 'Only a version that is in review can be approved. Send it for review first.',
  },
  supersede: { from: ['approved'], to: 'superseded', refusal: 'Only an approved version is superseded.' },
  withdraw: {
    from: ['approved', 'superseded'],
    to: 'withdrawn',
    refusal: 'Only a version that was approved can be withdrawn. A draft is discarded instead.',
  },
} as const satisfies Record<string, VersionMove>

export type VersionVerb = keyof typeof versionMoves

export function canMove(verb: VersionVerb, state: VersionState): boolean {
  const from: readonly VersionState[] = versionMoves[verb].from
  return from.includes(state)
}

/** The state that a verb leads to. @throws AppError 'conflict' when it is not allowed from this one. */
export function moveVersion(
  verb: VersionVerb,
  version: { number: number; state: VersionState },
): VersionState {
  if (canMove(verb, version.state)) return versionMoves[verb].to
  throw new AppError(
    'conflict',
    `Version ${version.number} is ${describeState(version.state)}. ${versionMoves[verb].refusal}`,
  )
}

/** A state within a sentence: "a draft", "in review". */
export function describeState(state: VersionState): string {
  return state === 'draft' ? 'a draft' : state
}

/** True while the content may still change. */
export function isEditable(state: VersionState): boolean {
  return state === 'draft'
}
