import { createSvgSink, traceLine } from './line-path'
import type { ModelDoseLine } from './pair-model'
import { horizontal, pathNode } from './pair-scene'
import { roundPx } from './round-px'
import type { PairScene } from './pair-scene'
import type { SvgNode } from './svg-layer'

/** What lies beneath the lines: the chosen stage, grid, plan band, dose strip, and the ground of unburnt time. */
export function drawUnder(scene: PairScene): SvgNode[] {
  return [
    ...drawChosenStage(scene),
    ...drawGrid(scene),
    ...drawPlanBand(scene),
    ...drawDose(scene),
    ...drawWoodGround(scene),
  ]
}

function drawChosenStage({ model, layout }: PairScene): SvgNode[] {
  return model.stages
    .filter((stage) => stage.isSelected)
    .map((stage) => ({
      tag: 'rect',
      attributes: {
        x: layout.toX(stage.startS),
        y: 0,
        width: Math.max(layout.toX(stage.endS) - layout.toX(stage.startS), 0),
        height: layout.wood?.top ?? (layout.dose ?? layout.fire).bottom,
        class: 'fill-wash',
      },
    }))
}

function drawGrid({ layout }: PairScene): SvgNode[] {
  const d = layout.ticksC.map((tick) => horizontal(layout.left, layout.right, layout.toFireY(tick))).join('')
  return d === '' ? [] : [pathNode(d, 'stroke-line opacity-60', 1)]
}

function drawPlanBand({ model, layout }: PairScene): SvgNode[] {
  if (model.planBand.length < 2) return []
  const upper = model.planBand.map(
    (point) => `${roundPx(layout.toX(point.timeS))} ${roundPx(layout.toFireY(point.highC))}`,
  )
  const lower = model.planBand
    .map((point) => `${roundPx(layout.toX(point.timeS))} ${roundPx(layout.toFireY(point.lowC))}`)
    .reverse()
  return [{ tag: 'path', attributes: { d: `M${[...upper, ...lower].join('L')}Z`, class: 'fill-plan' } }]
}

function drawDose(scene: PairScene): SvgNode[] {
  const { model, layout } = scene
  if (model.dose === null || layout.dose === null) return []
  const nodes: SvgNode[] = [
    pathNode(horizontal(layout.left, layout.right, layout.dose.bottom), 'stroke-line', 1),
  ]
  const { target, plan, others, line } = model.dose
  if (target !== null) {
    const top = layout.toDoseY(target.highMin)
    nodes.push({
      tag: 'rect',
      attributes: {
        x: layout.left,
        y: top,
        width: layout.right - layout.left,
        height: layout.toDoseY(target.lowMin) - top,
        class: 'fill-plan',
      },
    })
  }
  if (plan !== null) nodes.push(pathNode(doseLine(scene, plan), 'stroke-plan-line opacity-75', 4))
  for (const other of others) nodes.push(pathNode(doseLine(scene, other), 'stroke-mute', 1))
  nodes.push(pathNode(doseLine(scene, line), 'stroke-text', 2, { 'stroke-linejoin': 'round' }))
  return nodes
}

function doseLine({ layout }: PairScene, line: ModelDoseLine): string {
  const sink = createSvgSink()
  traceLine(sink, line.times, line.minutes, layout.toX, layout.toDoseY, 2)
  return sink.data()
}

function drawWoodGround({ layout }: PairScene): SvgNode[] {
  if (layout.wood === null) return []
  return [
    {
      tag: 'rect',
      attributes: {
        x: layout.left,
        y: layout.wood.top,
        width: layout.right - layout.left,
        height: layout.wood.bottom - layout.wood.top,
        class: 'fill-raised',
      },
    },
  ]
}
