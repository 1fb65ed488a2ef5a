export const lossKinds = ['broken at the pull', 'blister', 'leak', 'stave replaced'] as const
export type LossKind = (typeof lossKinds)[number]
export const blisterPlaces = ['bilge', 'quarter', 'head end'] as const
export type BlisterPlace = (typeof blisterPlaces)[number]
export const replacedWhens = ['before the toast', 'after the toast'] as const
export type ReplacedWhen = (typeof replacedWhens)[number]
/** A rose has about 30 staves; a large cask more. */
export const stavePositionAtMost = 60
/** What a stave put in after the toast is called when it has no toast of its own. */
export const untoasted = 'untoasted'

export type LossFacts = {
  kind: LossKind
  firingId: string | null
  stavePosition: number | null
  blisterPlace: string | null
  blisterSizeMm: number | null
  replacedWhen: string | null
  replacementLot: string | null
  replacementToast: string | null
}

/** What a loss of its kind lacks, or has too much of, by field (held by the database too). */
export function lossFaults(loss: LossFacts): [field: string, sentence: string][] {
  const faults: [string, string][] = []
  const isBlister = loss.kind === 'blister'
  const isReplaced = loss.kind === 'stave replaced'
  const isLate = loss.replacedWhen === 'after the toast'
  const want = (field: keyof LossFacts, isWanted: boolean, lacking: string, belongs: string) => {
    if (isWanted && loss[field] === null) faults.push([field, lacking])
    if (!isWanted && loss[field] !== null) faults.push([field, `Leave this out: it belongs to ${belongs}.`])
  }
  if (loss.kind !== 'leak' && loss.stavePosition === null)
    faults.push(['stavePosition', 'Give the stave’s number, counted from the bung stave.'])
  if (loss.kind === 'broken at the pull' && loss.firingId === null)
    faults.push(['firingId', 'A stave breaks at the pull of a firing: say of which.'])
  want('blisterPlace', isBlister, 'Say where the blister is.', 'a blister')
  want('blisterSizeMm', isBlister, 'Give the blister’s size in mm.', 'a blister')
  want('replacedWhen', isReplaced, 'Say whether before or after the toast.', 'a stave that was replaced')
  want('replacementLot', isReplaced, 'Name the lot of the new stave.', 'a stave that was replaced')
  want(
    'replacementToast',
    isLate,
    'Say its own toast, or that it is untoasted.',
    'a stave put in after the toast',
  )
  return faults
}
