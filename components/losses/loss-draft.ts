import type { BlisterPlace, LossKind, ReplacedWhen } from '@/lib/barrels/loss-kinds'
import { lossFaults, untoasted } from '@/lib/barrels/loss-kinds'
import type { LossDto } from '@/lib/barrels/schema'

/** A loss while it is written; what does not belong to its kind stays in the draft and is not sent. */
export type LossDraft = {
  /** Made once a form, so that a second press sends the same loss. */
  id: string
  firingId: string | null
  kind: LossKind
  stavePosition: number | null
  woodLot: string
  blisterPlace: BlisterPlace | null
  blisterSizeMm: number | null
  replacedWhen: ReplacedWhen | null
  replacementLot: string
  isUntoasted: boolean
  replacementToast: string
  words: string
  replacesId: string | null
}

export function newLossDraft(given: { firingId: string | null; woodLot: string; kind: LossKind }): LossDraft {
  return {
    ...given,
    id: crypto.randomUUID(),
    stavePosition: null,
    blisterPlace: null,
    blisterSizeMm: null,
    replacedWhen: null,
    replacementLot: given.woodLot,
    isUntoasted: true,
    replacementToast: '',
    words: '',
    replacesId: null,
  }
}

/** The draft that puts a loss right. */
export function draftOfLoss(loss: LossDto): LossDraft {
  return {
    id: crypto.randomUUID(),
    firingId: loss.firingId,
    kind: loss.kind,
    stavePosition: loss.stavePosition,
    woodLot: loss.woodLot,
    blisterPlace: loss.blisterPlace,
    blisterSizeMm: loss.blisterSizeMm,
    replacedWhen: loss.replacedWhen,
    replacementLot: loss.replacementLot ?? loss.woodLot,
    isUntoasted: loss.replacementToast === null || loss.replacementToast === untoasted,
    replacementToast: loss.replacementToast === untoasted ? '' : (loss.replacementToast ?? ''),
    words: loss.words,
    replacesId: loss.id,
  }
}

/** What is sent: the fields of its kind, and no others. */
export function lossBody(draft: LossDraft) {
  const isBlister = draft.kind === 'blister'
  const isReplaced = draft.kind === 'stave replaced'
  const isLate = isReplaced && draft.replacedWhen === 'after the toast'
  return {
    id: draft.id,
    firingId: draft.firingId,
    kind: draft.kind,
    stavePosition: draft.stavePosition,
    woodLot: draft.woodLot.trim(),
    blisterPlace: isBlister ? draft.blisterPlace : null,
    blisterSizeMm: isBlister ? draft.blisterSizeMm : null,
    replacedWhen: isReplaced ? draft.replacedWhen : null,
    replacementLot: isReplaced ? draft.replacementLot.trim() || null : null,
    replacementToast: isLate ? (draft.isUntoasted ? untoasted : draft.replacementToast.trim() || null) : null,
    words: draft.words.trim(),
    ...(draft.replacesId === null ? {} : { replacesId: draft.replacesId }),
  }
}

/** What the draft lacks, by field, before it is sent. */
export function draftFaults(draft: LossDraft): Record<string, string> {
  const faults = Object.fromEntries(lossFaults(lossBody(draft)))
  return draft.woodLot.trim() === '' ? { ...faults, woodLot: 'Name the wood lot.' } : faults
}
