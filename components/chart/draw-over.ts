import { formatClock, formatDoseFigure, formatTempBare } from '@/lib/format'
import { drawEndNames } from './draw-end-names'
import { drawWoodLines } from './draw-wood-lines'
import { fitWords } from './label-layout'
import { valueAt } from '@/lib/science/straight-line'
import { HEAD_FRESH_S, lastReading } from './pair-model'
import { HALO, horizontal, pathNode, textNode, vertical } from './pair-scene'
import type { PairScene } from './pair-scene'
import type { SvgNode } from './svg-layer'

/** What stands over the lines: stages, marks, limit, names, axes, wood lines, head and pointer. */
export function drawOver(scene: PairScene): SvgNode[] {
  return [
    ...drawStages(scene),
    ...drawLimit(scene),
    ...drawMarks(scene),
    ...drawTitles(scene),
    ...drawWoodLines(scene),
    ...drawAxes(scene),
    ...drawNow(scene),
    ...drawEndNames(scene),
    ...drawPointed(scene),
  ]
}

const STAGE_INSET_PX = 7

function drawStages(scene: PairScene): SvgNode[] {
  const { model, layout } = scene
  const bottom = layout.wood?.top ?? (layout.dose ?? layout.fire).bottom
  const starts = model.stages
    .filter((stage) => stage.startS > 0)
    .map((stage) => vertical(layout.toX(stage.startS), 0, bottom))
  const lines = starts.length === 0 ? [] : [pathNode(starts.join(''), 'stroke-line', 1)]
  return [...lines, ...model.stages.flatMap((stage) => drawStageName(scene, stage))]
}

function drawStageName(
  { model, layout, type, isFireside, measure }: PairScene,
  stage: PairScene['model']['stages'][number],
): SvgNode[] {
  const isStrong = stage.isCurrent === true || (!isFireside && !model.stages.some((each) => each.isCurrent))
  const style = isStrong ? type.stageStrong : type.stage
  const x = layout.toX(stage.startS) + STAGE_INSET_PX
  const room = Math.min(layout.toX(stage.endS), layout.width) - x - 3
  const name = fitWords(stage.name, room, (words) => measure(words, style))
  if (name === '') return []
  const nodes = [
    textNode(name, x, layout.stageBaseline, { style, fill: isStrong ? 'fill-text' : 'fill-mute' }),
  ]
  const minutes = stage.minutes === undefined ? '' : `${Number(stage.minutes.toFixed(1))} min`
  const minutesX = x + measure(name, style) + 8
  if (minutes !== '' && name === stage.name && minutesX + measure(minutes, type.stage) <= x + room) {
    nodes.push(
      textNode(minutes, minutesX, layout.stageBaseline, {
        style: { ...type.stage, px: type.label.px },
        fill: 'fill-mute',
      }),
    )
  }
  return nodes
}

function drawLimit({ model, layout }: PairScene): SvgNode[] {
  if (model.limitC === null) return []
  return [
    pathNode(horizontal(layout.left, layout.right, layout.toFireY(model.limitC)), 'stroke-red', 1.75, {
      'stroke-dasharray': '3 4',
    }),
  ]
}

/** From the lead line at the mark's moment, past the words on the seam, through the wood. */
function drawMarks(scene: PairScene): SvgNode[] {
  const { model, layout, type } = scene
  const nodes: SvgNode[] = []
  let above = ''
  let inWood = ''
  for (const mark of model.marks) {
    const x = layout.toX(mark.timeS)
    const tempC = leadAt(scene, mark.timeS)
    const label = layout.marks.find((placed) => placed.xs.includes(x))
    const baseline = layout.markBaselines[label?.row ?? 0] ?? layout.fire.bottom
    above += vertical(
      x,
      Number.isNaN(tempC) ? layout.fire.bottom - type.label.px : layout.toFireY(tempC),
      baseline - type.label.px,
    )
    if (layout.wood !== null) inWood += vertical(x, layout.wood.top, layout.wood.bottom)
  }
  if (above !== '') nodes.push(pathNode(above, 'stroke-edge opacity-60', 1))
  if (inWood !== '') nodes.push(pathNode(inWood, 'stroke-on-alarm opacity-30', 1))
  for (const placed of layout.marks) {
    const y = layout.markBaselines[placed.row] ?? layout.fire.bottom
    nodes.push(textNode(placed.words, placed.left, y, { style: type.label, fill: 'fill-text', halo: HALO }))
  }
  return nodes
}

/** The lead where it was measured, else where it was joined, else its last reading before. */
function leadAt({ model }: PairScene, timeS: number): number {
  const { lead } = model
  const measured = valueAt(lead.times, lead.temps, timeS)
  if (!Number.isNaN(measured)) return measured
  const joined = lead.interpolated === null ? NaN : valueAt(lead.times, lead.interpolated, timeS)
  if (!Number.isNaN(joined)) return joined
  for (let i = lead.times.length - 1; i >= 0; i -= 1) {
    if ((lead.times[i] ?? 0) <= timeS && !Number.isNaN(lead.temps[i] ?? NaN)) return lead.temps[i] ?? NaN
  }
  return NaN
}

function drawTitles({ model, layout, type }: PairScene): SvgNode[] {
  const look = { style: type.strong, fill: 'fill-soft', halo: HALO }
  const nodes: SvgNode[] = []
  if (model.dose !== null && layout.dose !== null)
    nodes.push(textNode(model.dose.title, layout.left, layout.doseTitleBaseline, look))
  if (layout.woodTitleBaseline !== null) {
    nodes.push(
      textNode('Inside the stave, mm from the fire (model)', layout.left, layout.woodTitleBaseline, look),
    )
  }
  return nodes
}

function drawAxes(scene: PairScene): SvgNode[] {
  const { model, layout, type } = scene
  const look = { style: type.axis, fill: 'fill-mute', anchor: 'end' } as const
  const shift = type.axis.px * 0.35
  const nodes = layout.ticksC.map((tick) =>
    textNode(formatTempBare(tick, model.unit), layout.left - 8, layout.toFireY(tick) + shift, look),
  )
  for (const tick of layout.ticksMm)
    nodes.push(textNode(String(tick), layout.left - 8, layout.toWoodY(tick) + shift, look))
  return [...nodes, ...drawTimeAxis(scene)]
}

function drawTimeAxis({ model, layout, type, measure, pointedS }: PairScene): SvgNode[] {
  const strongS = pointedS ?? model.nowS
  const strong = strongS === null ? null : { words: formatClock(strongS), x: layout.toX(strongS) }
  const strongHalf = strong === null ? 0 : measure(strong.words, type.strong) / 2
  const nodes: SvgNode[] = []
  for (const tick of layout.ticksS) {
    const words = tick === 0 ? '0 min' : String(tick / 60)
    const half = measure(words, type.axis) / 2
    const x = Math.max(layout.toX(tick), half)
    if (strong !== null && Math.abs(x - strong.x) < half + strongHalf + 8) continue
    if (x + half > layout.width) continue
    nodes.push(
      textNode(words, x, layout.axisBaseline, { style: type.axis, fill: 'fill-mute', anchor: 'middle' }),
    )
  }
  if (strong !== null) {
    const x = Math.min(strong.x, layout.width - strongHalf - 1)
    nodes.push(
      textNode(strong.words, Math.max(x, strongHalf), layout.axisBaseline, {
        style: type.strong,
        fill: 'fill-text',
        anchor: 'middle',
      }),
    )
  }
  return nodes
}

function drawNow({ model, layout, type }: PairScene): SvgNode[] {
  if (model.nowS === null) return []
  const x = layout.toX(model.nowS)
  const nodes: SvgNode[] = [
    pathNode(
      vertical(x, layout.fire.top + type.stage.px * 0.2, layout.wood?.bottom ?? layout.fire.bottom),
      'stroke-text opacity-80',
      1,
    ),
  ]
  const head = lastReading(model.lead)
  if (head !== null && model.nowS - head.timeS <= HEAD_FRESH_S) {
    nodes.push({
      tag: 'circle',
      attributes: {
        cx: layout.toX(head.timeS),
        cy: layout.toFireY(head.tempC),
        r: type.axis.px / 3,
        class: 'fill-text',
      },
    })
  }
  return nodes
}

/** Under the pointer: a hairline, the lead's figure at its line and the dose's at its own. */
function drawPointed({ model, layout, type, pointedS }: PairScene): SvgNode[] {
  if (pointedS === null) return []
  const x = layout.toX(pointedS)
  const nodes: SvgNode[] = [
    pathNode(vertical(x, layout.fire.top, layout.wood?.bottom ?? layout.fire.bottom), 'stroke-water', 1),
  ]
  const isNearRight = x > layout.right - 60
  const look = {
    style: type.strong,
    fill: 'fill-text',
    anchor: isNearRight ? 'end' : 'start',
    halo: HALO,
  } as const
  const textX = isNearRight ? x - 7 : x + 7
  const tempC = valueAt(model.lead.times, model.lead.temps, pointedS)
  if (!Number.isNaN(tempC)) {
    const y = layout.toFireY(tempC)
    nodes.push({ tag: 'circle', attributes: { cx: x, cy: y, r: 3.5, class: 'fill-text' } })
    nodes.push(textNode(formatTempBare(tempC, model.unit), textX, y - 9, look))
  }
  if (model.dose !== null && layout.dose !== null) {
    const minutes = valueAt(model.dose.line.times, model.dose.line.minutes, pointedS)
    if (!Number.isNaN(minutes))
      nodes.push(textNode(formatDoseFigure(minutes), textX, layout.toDoseY(minutes) - 7, look))
  }
  return nodes
}
