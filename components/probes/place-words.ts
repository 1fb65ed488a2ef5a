import { formatNumber } from '@/lib/format'

type Place = { height: string; side: string; depthMm: number; mounting: string }

/** "bilge A, 2 mm, wedge"; a coals probe has no depth. */
export function placeWords({ height, side, depthMm, mounting }: Place): string {
  const depth = height === 'coals' ? '' : `, ${formatNumber(depthMm, depthMm % 1 === 0 ? 0 : 1)}\u00a0mm`
  return `${height} ${side}${depth}, ${mounting}`
}

/** "hearth 2, lead" or "no hearth, spare". */
export function hearthWords(hearthNumber: number | null, role: string): string {
  return `${hearthNumber === null ? 'no hearth' : `hearth ${hearthNumber}`}, ${role}`
}
