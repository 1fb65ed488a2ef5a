/** The toaster's own judgement at a stage's end; kept beside the score, never inside it. */
export const calls = ['early', 'right', 'late'] as const
export type Call = (typeof calls)[number]
