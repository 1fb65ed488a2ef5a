import { capitalize } from '@/lib/format'
import type { LossDto } from '@/lib/barrels/schema'
import { formatNumber } from '@/lib/format'

/** A loss in one sentence: "Stave 12: blister at the bilge, 22 mm." */
export function lossWords(loss: LossDto): string {
  const where = loss.stavePosition === null ? '' : `Stave ${loss.stavePosition}: `
  const what = whatWords(loss)
  return `${where}${where === '' ? capitalize(what) : what}.`
}

function whatWords(loss: LossDto): string {
  if (loss.kind === 'blister')
    return `blister at the ${loss.blisterPlace ?? ''}, ${formatNumber(loss.blisterSizeMm ?? 0)}\u00a0mm`
  if (loss.kind === 'leak') return loss.stavePosition === null ? 'leak, no stave known' : 'leak'
  if (loss.kind === 'broken at the pull') return 'broken at the pull'
  const from = `replaced ${loss.replacedWhen ?? ''} by one of lot ${loss.replacementLot ?? ''}`
  if (loss.replacedWhen !== 'after the toast') return from
  return loss.replacementToast === 'untoasted'
    ? `${from}, untoasted`
    : `${from}, its own toast: ${loss.replacementToast ?? ''}`
}
