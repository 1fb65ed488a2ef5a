import { formatTempBare } from '@/lib/format'
import { placeMarks } from './label-layout'
import type { PlacedWords } from './label-layout'
import type { ModelDose, PairModel } from './pair-model'
import { depthTicksMm, temperatureTicksC, timeTicksS } from './pair-scales'
import { describeGutterWords } from './pair-words'

export type TextStyle = { px: number; weight: number }
export type MeasureText = (words: string, style: TextStyle) => number

/** Type sizes by ground and size; nothing at the fireside is under 17 px. */
export type PairType = {
  axis: TextStyle
  stage: TextStyle
  stageStrong: TextStyle
  label: TextStyle
  strong: TextStyle
}

export function choosePairType(isFireside: boolean, size: PairModel['size']): PairType {
  const axisPx = isFireside ? (size === 'large' ? 18 : 17) : size === 'large' ? 13.5 : 12.5
  const stagePx = isFireside ? (size === 'large' ? 21 : 17) : size === 'large' ? 14.5 : 13
  return {
    axis: { px: axisPx, weight: 400 },
    label: { px: axisPx, weight: 400 },
    strong: { px: isFireside && size === 'large' ? 19 : axisPx, weight: 640 },
    stage: { px: stagePx, weight: 400 },
    stageStrong: { px: stagePx, weight: 640 },
  }
}

type Span = { top: number; bottom: number }

export type PairLayout = {
  width: number
  height: number
  left: number
  right: number
  stageBaseline: number
  fire: Span
  marks: PlacedWords[]
  /** Baseline of each row of mark words. */
  markBaselines: number[]
  doseTitleBaseline: number
  dose: Span | null
  woodTitleBaseline: number | null
  wood: Span | null
  axisBaseline: number
  ticksC: number[]
  ticksS: number[]
  ticksMm: number[]
  toX: (timeS: number) => number
  toFireY: (tempC: number) => number
  toDoseY: (minutes: number) => number
  toWoodY: (depthMm: number) => number
}

/** Height of a line of names, in parts of its type size. */
export const NAME_LINE = 1.32
/** The least height of the fire beside a dose strip, in parts of the axis type size. */
const LEAST_FIRE = 9
const GUTTER_PX = 10

/** Places everything in a box of the given size. Pure, given a way to measure words. */
export function layOutPair(
  model: PairModel,
  box: { width: number; height: number },
  type: PairType,
  isFireside: boolean,
  measure: MeasureText,
): PairLayout {
  const { left, right } = findEdges(model, box.width, type, measure)
  const toX = (timeS: number) => left + (timeS / model.xMaxS) * (right - left)
  const marks = placeMarks(
    model.marks.map((mark) => ({ x: toX(mark.timeS), words: mark.words })),
    (words) => measure(words, type.label),
    {
      left: left - GUTTER_PX,
      right: right + GUTTER_PX,
      gap: type.label.px * 0.8,
      rows: model.size === 'large' ? 3 : 1,
      togetherPx: 3,
    },
  )
  const bands = stackBands(model, box.height, type, isFireside, countRows(marks))
  return {
    ...box,
    ...bands,
    left,
    right,
    marks,
    toX,
    ...chooseTicks(model, type, bands, right - left),
    ...scaleBands(model, bands),
  }
}

/** Left and right edge of the plots: what is left over by the figures of the axes and the names in the gutter. */
function findEdges(model: PairModel, width: number, type: PairType, measure: MeasureText) {
  const figures = [formatTempBare(model.lowC, model.unit), formatTempBare(model.highC, model.unit), '15']
  const left = GUTTER_PX + Math.max(...figures.map((figure) => measure(figure, type.axis)))
  const names = describeGutterWords(model)
  const widest = Math.max(
    0,
    ...names.map(({ words, isStrong }) => measure(words, isStrong ? type.strong : type.label)),
  )
  const gutter = widest === 0 ? 14 : Math.min(widest + GUTTER_PX + 2, width * 0.3)
  return { left, right: Math.max(width - gutter, left + 40) }
}

type Bands = ReturnType<typeof stackBands>

/** As many ticks as stand apart, and no more than a person would read. */
function chooseTicks(model: PairModel, type: PairType, { fire, wood }: Bands, width: number) {
  const mostC = Math.max(Math.floor((fire.bottom - fire.top) / (type.axis.px * 2.4)), 1)
  return {
    ticksC: temperatureTicksC(
      model.lowC,
      model.highC,
      model.unit,
      Math.min(mostC, model.size === 'large' ? 5 : 3),
    ),
    ticksS: timeTicksS(model.xMaxS, width, type.axis.px * 4.4),
    ticksMm: wood === null ? [] : depthTicksMm(model.depthMaxMm, wood.bottom - wood.top, type.axis.px * 1.4),
  }
}

function scaleBands(model: PairModel, { fire, dose, wood }: Bands) {
  const scale = (band: Span | null, share: number) =>
    band === null ? 0 : band.top + share * (band.bottom - band.top)
  const doseTop = (model.dose?.maxMin ?? 1) * 1.08
  return {
    toFireY: (tempC: number) => scale(fire, (model.highC - tempC) / (model.highC - model.lowC)),
    toDoseY: (minutes: number) => scale(dose, 1 - minutes / doseTop),
    toWoodY: (depthMm: number) => scale(wood, depthMm / model.depthMaxMm),
  }
}

function countRows(marks: readonly PlacedWords[]): number {
  return marks.reduce((most, mark) => Math.max(most, mark.row + 1), 0)
}

function countDoseNames(dose: ModelDose): number {
  return 1 + (dose.plan === null ? 0 : 1) + (dose.target === null ? 0 : 1)
}

/** In a box too low for all three the dose strip gives way: fire and wood are the pair. */
function stackBands(model: PairModel, height: number, type: PairType, isFireside: boolean, markRows: number) {
  const all = stackAll(model, model.dose, height, type, isFireside, markRows)
  const isTooLow = all.fire.bottom - all.fire.top < type.axis.px * LEAST_FIRE
  return isTooLow ? stackAll(model, null, height, type, isFireside, markRows) : all
}

/** Heights from the top: stage names, fire, words of the marks, dose, wood, time axis. */
function stackAll(
  model: PairModel,
  dose: ModelDose | null,
  height: number,
  type: PairType,
  isFireside: boolean,
  markRows: number,
) {
  const line = type.axis.px * 1.5
  // At least as high as the names at their right edge together.
  const nameLine = type.label.px * NAME_LINE
  const leastDose = dose === null ? 0 : nameLine * countDoseNames(dose)
  const leastWood = model.wood === null ? 0 : nameLine * (model.nowS === null ? 3 : 4)
  const hasWoodTitle = model.wood !== null && !isFireside && model.size === 'large'
  const stageHeight = model.stages.length === 0 ? 8 : type.stage.px * 1.9
  const seamHeight = markRows === 0 ? 12 : markRows * line + line * 0.45
  const axisHeight = type.axis.px * 1.8
  const doseTitle = dose === null ? 0 : line * 1.35
  const woodTitle = hasWoodTitle ? line * 1.5 : 0
  const free = Math.max(height - stageHeight - seamHeight - axisHeight - doseTitle - woodTitle, 60)
  const doseHeight = dose === null ? 0 : Math.max(free * 0.13, leastDose)
  const woodHeight = model.wood === null ? 0 : Math.max((free - doseHeight) * 0.3, leastWood)
  const fire = { top: stageHeight, bottom: stageHeight + Math.max(free - doseHeight - woodHeight, 20) }
  const doseTop = fire.bottom + seamHeight + doseTitle
  const woodTop = doseTop + doseHeight + woodTitle
  return {
    stageBaseline: type.stage.px * 1.15,
    fire,
    markBaselines: Array.from({ length: markRows }, (_, row) => fire.bottom + line * (row + 0.86)),
    doseTitleBaseline: doseTop - doseTitle * 0.38,
    dose: dose === null ? null : { top: doseTop, bottom: doseTop + doseHeight },
    woodTitleBaseline: hasWoodTitle ? woodTop - woodTitle * 0.38 : null,
    wood: model.wood === null ? null : { top: woodTop, bottom: woodTop + woodHeight },
    axisBaseline: height - type.axis.px * 0.35,
  }
}
