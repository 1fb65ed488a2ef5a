import { formatTempBare } from '@/lib/format'
import { spreadLabels } from './label-layout'
import { createSvgSink, traceLine } from './line-path'
import { NAME_LINE } from './pair-layout'
import type { TextStyle } from './pair-layout'
import { pathNode, textNode } from './pair-scene'
import type { PairScene } from './pair-scene'
import { isLive, toastWords } from './pair-words'
import type { SvgNode } from './svg-layer'

type WoodName = { words: string; isAtRight: boolean; x: number; y: number; style: TextStyle; fill: string }

const OFF_PX = 8

/** Isotherms thin, toast depth pale and heavy, each with its figure at its end. */
export function drawWoodLines(scene: PairScene): SvgNode[] {
  const { model, layout, type } = scene
  const { wood } = model
  if (wood === null || layout.wood === null) return []
  const nodes: SvgNode[] = [
    pathNode(depthLine(scene, wood.isotherm100Mm), 'stroke-on-alarm opacity-70', 1.1),
    pathNode(depthLine(scene, wood.isotherm150Mm), 'stroke-on-alarm opacity-70', 1.1),
    pathNode(depthLine(scene, wood.toastDepthMm), 'stroke-[#f8fbfc]', 2.5, { 'stroke-linejoin': 'round' }),
  ]
  nodes.push(...drawToastRange(scene))
  nodes.push(...placeWoodNames(scene, woodNames(scene)))
  if (isRemarkShown(scene)) {
    const look = { style: type.label, fill: 'fill-mute', anchor: 'end' } as const
    nodes.push(
      textNode('mm into the stave, modelled', layout.right, layout.wood.bottom - type.label.px * 0.5, look),
    )
  }
  return nodes
}

/** Where the fireside has room right of the picture it says what the picture is; the desk has a title for that. */
function isRemarkShown({ model, layout, measure, type, isFireside }: PairScene): boolean {
  if (!isFireside || model.size !== 'large') return false
  const end = model.wood?.times.at(-1) ?? 0
  return layout.toX(end) + measure('mm into the stave, modelled', type.label) + 24 < layout.right
}

/** Only what lies inside the picture: deeper than its bottom is cut. */
function depthLine({ model, layout }: PairScene, depthsMm: Float64Array): string {
  const sink = createSvgSink()
  const shown = depthsMm.map((depth, i) => {
    const isFlat = depth <= 0 && !((depthsMm[i + 1] ?? 0) > 0)
    return isFlat || depth > model.depthMaxMm ? NaN : depth
  })
  traceLine(sink, model.wood?.times ?? [], shown, layout.toX, layout.toWoodY, 2)
  return sink.data()
}

function drawToastRange({ model, layout }: PairScene): SvgNode[] {
  const range = model.wood?.lastToastRange ?? null
  const end = model.wood?.times.at(-1)
  if (range === null || end === undefined || range.high <= 0) return []
  const x = Math.round(layout.toX(end)) + 2.5
  const clip = (depth: number) => layout.toWoodY(Math.min(depth, model.depthMaxMm))
  return [pathNode(`M${x} ${clip(range.low)}V${clip(range.high)}`, 'stroke-text', 1.25)]
}

function woodNames(scene: PairScene): WoodName[] {
  const { model, type } = scene
  const { wood } = model
  if (wood === null) return []
  const names: WoodName[] = []
  const thin = (depths: Float64Array, tempC: number) => {
    const end = endOf(scene, depths)
    if (end === null || end.depthMm <= 0.2) return
    const words = formatTempBare(tempC, model.unit)
    if (end.isAtRight) names.push({ words, ...end, style: type.label, fill: 'fill-soft' })
    else
      names.push({
        words,
        isAtRight: false,
        x: end.x,
        y: end.y - type.label.px * 0.7,
        style: type.label,
        fill: 'fill-on-alarm',
      })
  }
  thin(wood.isotherm150Mm, 150)
  thin(wood.isotherm100Mm, 100)
  const toast = endOf(scene, wood.toastDepthMm)
  if (toast !== null && toast.depthMm > 0) {
    names.push({ words: toastWords(toast.depthMm), ...toast, style: type.strong, fill: 'fill-text' })
  }
  return names
}

function endOf({ model, layout }: PairScene, depthsMm: Float64Array) {
  const times = model.wood?.times ?? new Float64Array(0)
  for (let i = depthsMm.length - 1; i >= 0; i -= 1) {
    const depthMm = depthsMm[i] ?? NaN
    if (Number.isNaN(depthMm) || depthMm > model.depthMaxMm) continue
    const isAtRight = i >= depthsMm.length - 2
    return { depthMm, isAtRight, x: layout.toX(times[i] ?? 0) + OFF_PX, y: layout.toWoodY(depthMm) }
  }
  return null
}

/** At the picture's right edge the names are spread; in the gutter the toast depth breaks into two lines. */
function placeWoodNames(scene: PairScene, names: readonly WoodName[]): SvgNode[] {
  const { layout, measure, type, model } = scene
  const end = layout.toX(Math.max(model.wood?.times.at(-1) ?? 0, model.nowS ?? 0)) + OFF_PX
  const right = names.filter((name) => name.isAtRight)
  const inside = names.filter((name) => !name.isAtRight)
  const isTight = isLive(model) && right.some((name) => end + measure(name.words, name.style) > layout.width)
  const lines = (name: WoodName) =>
    isTight && name.words.startsWith('toasted ') ? ['toasted', name.words.slice(8)] : [name.words]
  const size = type.label.px * NAME_LINE
  const wood = layout.wood ?? { top: 0, bottom: 0 }
  const centres = spreadLabels(
    right.map((name) => ({ centre: name.y, size: size * lines(name).length })),
    0,
    wood.top,
    wood.bottom + 2 - (isRemarkShown(scene) ? type.label.px * 1.6 : 0),
  )
  const atRight = right.flatMap((name, i) =>
    lines(name).map((words, row, all) =>
      textNode(words, end, (centres[i] ?? 0) + (row - (all.length - 1) / 2) * size + name.style.px * 0.35, {
        style: name.style,
        fill: name.fill,
      }),
    ),
  )
  return [
    ...inside.map((name) => textNode(name.words, name.x, name.y, { style: name.style, fill: name.fill })),
    ...atRight,
  ]
}
