import type { MeasureText, PairLayout, PairType, TextStyle } from './pair-layout'
import type { PairModel } from './pair-model'
import { roundPx } from './round-px'
import type { SvgNode } from './svg-layer'

/** All that drawing needs. */
export type PairScene = {
  model: PairModel
  layout: PairLayout
  type: PairType
  isFireside: boolean
  measure: MeasureText
  /** Where a pointer rests on the time axis, s; null when none does. */
  pointedS: number | null
}

export type TextLook = {
  style: TextStyle
  fill: string
  anchor?: 'start' | 'middle' | 'end'
  /** Class of a halo in the ground's colour, so that lines beneath do not cut the words. */ halo?: string
}

export const HALO = 'stroke-ground'

export function textNode(
  words: string,
  x: number,
  y: number,
  { style, fill, anchor = 'start', halo }: TextLook,
): SvgNode {
  const base = { x, y, 'font-size': style.px, 'font-weight': style.weight, 'text-anchor': anchor }
  const attributes =
    halo === undefined
      ? { ...base, class: fill }
      : {
          ...base,
          class: `${fill} ${halo}`,
          'paint-order': 'stroke',
          'stroke-width': 5,
          'stroke-linejoin': 'round',
        }
  return { tag: 'text', words, attributes }
}

export function pathNode(
  d: string,
  className: string,
  strokeWidth: number,
  more: Readonly<Record<string, string | number>> = {},
): SvgNode {
  return {
    tag: 'path',
    attributes: { d, class: `fill-none ${className}`, 'stroke-width': strokeWidth, ...more },
  }
}

/** A crisp one-pixel vertical. */
export function vertical(x: number, fromY: number, toY: number): string {
  const at = Math.round(x) + 0.5
  return `M${at} ${roundPx(fromY)}V${roundPx(toY)}`
}

/** A crisp one-pixel horizontal. */
export function horizontal(fromX: number, toX: number, y: number): string {
  return `M${roundPx(fromX)} ${Math.round(y) + 0.5}H${roundPx(toX)}`
}
