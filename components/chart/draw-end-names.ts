import { formatDoseFigure } from '@/lib/format'
import { spreadLabels } from './label-layout'
import { NAME_LINE } from './pair-layout'
import type { TextStyle } from './pair-layout'
import { lastReading } from './pair-model'
import type { ModelLine } from './pair-model'
import { pathNode, textNode } from './pair-scene'
import { roundPx } from './round-px'
import type { PairScene } from './pair-scene'
import { isLive, limitWords } from './pair-words'
import type { SvgNode } from './svg-layer'

type EndName = { words: string; x: number; y: number; style: TextStyle; fill: string }

const OFF_PX = 10

/** Names at the lines' ends, pushed apart where they would cover each other. */
export function drawEndNames(scene: PairScene): SvgNode[] {
  const { layout } = scene
  return [
    ...spreadNames(scene, fireNames(scene), layout.fire.top - 4, layout.fire.bottom),
    ...spreadNames(scene, doseNames(scene), layout.dose?.top ?? 0, layout.dose?.bottom ?? 0),
    ...drawDoseStem(scene),
  ]
}

function fireNames(scene: PairScene): EndName[] {
  const { model, layout, type } = scene
  const names: EndName[] = []
  const bandEnd = model.planBand.at(-1)
  if (bandEnd !== undefined) {
    const y = layout.toFireY(bandEnd.midC)
    names.push({
      words: model.planName,
      x: layout.toX(bandEnd.timeS) + OFF_PX,
      y,
      style: type.label,
      fill: 'fill-mute',
    })
  }
  if (model.limitC !== null) {
    const y = layout.toFireY(model.limitC)
    names.push({
      words: limitWords(model.limitC, model.unit),
      x: layout.right + OFF_PX,
      y,
      style: type.label,
      fill: 'fill-red',
    })
  }
  if (!isLive(model)) {
    names.push(...lineNames(scene, [model.lead], type.label, 'fill-text'))
    names.push(
      ...lineNames(
        scene,
        [...(model.second ? [model.second] : []), ...model.others],
        type.label,
        'fill-mute',
      ),
    )
  }
  return names.filter((name) => name.words !== '')
}

function lineNames(
  { layout, type }: PairScene,
  lines: readonly ModelLine[],
  style: TextStyle,
  fill: string,
): EndName[] {
  return lines.flatMap((line) => {
    const end = lastReading(line)
    if (end === null) return []
    const x = layout.toX(end.timeS) + OFF_PX
    const look = line.isSelected ? { style: type.strong, fill: 'fill-water' } : { style, fill }
    return [{ words: line.name, x, y: layout.toFireY(end.tempC), ...look }]
  })
}

function doseNames({ model, layout, type }: PairScene): EndName[] {
  const { dose } = model
  if (dose === null || layout.dose === null) return []
  const names: EndName[] = []
  const last = lastMinutes(dose.line)
  if (last !== null) {
    names.push({
      words: formatDoseFigure(last.minutes),
      x: layout.toX(last.timeS) + OFF_PX,
      y: layout.toDoseY(last.minutes),
      style: type.label,
      fill: 'fill-text',
    })
  }
  const plan = dose.plan === null ? null : lastMinutes(dose.plan)
  if (plan !== null) {
    names.push({
      words: `plan ${formatDoseFigure(plan.minutes)}`,
      x: layout.toX(plan.timeS) + OFF_PX,
      y: layout.toDoseY(plan.minutes),
      style: type.label,
      fill: 'fill-mute',
    })
  }
  if (dose.target !== null) {
    const y = layout.toDoseY(dose.target.targetMin)
    names.push({
      words: `target ${formatDoseFigure(dose.target.targetMin)}`,
      x: layout.right + OFF_PX,
      y,
      style: type.label,
      fill: 'fill-mute',
    })
  }
  return names
}

/** The k = 2 range of the dose at its end, as a short stem. */
function drawDoseStem({ model, layout }: PairScene): SvgNode[] {
  const { dose } = model
  const last = dose === null ? null : lastMinutes(dose.line)
  if (dose === null || layout.dose === null || last === null || dose.range === null) return []
  const x = roundPx(layout.toX(last.timeS))
  return [
    pathNode(
      `M${x} ${roundPx(layout.toDoseY(dose.range.lowMin))}V${roundPx(layout.toDoseY(dose.range.highMin))}`,
      'stroke-text',
      1.25,
    ),
  ]
}

function lastMinutes(line: {
  times: Float64Array
  minutes: Float64Array
}): { timeS: number; minutes: number } | null {
  for (let i = line.minutes.length - 1; i >= 0; i -= 1) {
    const minutes = line.minutes[i] ?? NaN
    if (!Number.isNaN(minutes)) return { timeS: line.times[i] ?? NaN, minutes }
  }
  return null
}

/**
 * Names that end in the gutter stand in one column and are spread there; a line that ends well before keeps
 * its name at its own end, spread among those near it.
 */
function spreadNames(scene: PairScene, names: readonly EndName[], low: number, high: number): SvgNode[] {
  const { layout, measure } = scene
  const size = scene.type.label.px * NAME_LINE
  const isGutter = (name: EndName) => name.x + measure(name.words, name.style) > layout.right
  const gutter = names.filter(isGutter)
  const gutterX = layout.right + OFF_PX
  const inner = names.filter((name) => !isGutter(name))
  return [
    ...placeColumn(inner, size, low, high),
    ...placeColumn(
      gutter.map((name) => ({ ...name, x: gutterX })),
      size,
      low,
      high,
    ),
  ]
}

function placeColumn(all: readonly EndName[], size: number, low: number, high: number): SvgNode[] {
  const names = keepWhatFits(all, Math.max(Math.floor((high - low) / size + 1e-9), 1))
  const centres = spreadLabels(
    names.map((name) => ({ centre: name.y, size })),
    0,
    low,
    high,
  )
  return names.map((name, i) =>
    textNode(name.words, name.x, (centres[i] ?? name.y) + name.style.px * 0.35, {
      style: name.style,
      fill: name.fill,
    }),
  )
}

/** The first names, which matter most, and a count of the rest. */
function keepWhatFits(names: readonly EndName[], most: number): readonly EndName[] {
  const last = names[most - 1]
  if (names.length <= most || last === undefined) return names
  return [
    ...names.slice(0, most - 1),
    { ...last, words: `and ${names.length - most + 1} more`, fill: 'fill-mute' },
  ]
}
