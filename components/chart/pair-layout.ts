import { formatTempBare } from '@/lib/format'
import { placeMarks } from './label-layout'
import type { PlacedWords } from './label-layout'
import type { PairModel } from './pair-model'
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

const GUTTER_PX = 10

/** Places everything in a box of the given size. Pure, given a way to measure words. */
export function layOutPair(
  model: PairModel,
  box: { width: number; height: number },
  type: PairType,
  isFireside: boolean,
  measure: MeasureText,
): PairLayout {
  const line = type.axis.px * 1.5
  const ticksC = temperatureTicksC(model.lowC, model.highC, model.unit, model.size === 'large' ? 5 : 3)
  const left =
    GUTTER_PX +
    Math.max(
      ...ticksC.map((tick) => measure(formatTempBare(tick, model.unit), type.axis)),
      measure('15', type.axis),
      10,
    )
  const widest = Math.max(
    0,
    ...describeGutterWords(model).map(({ words, isStrong }) =>
      measure(words, isStrong ? type.strong : type.label),
    ),
  )
  const right = Math.max(
    box.width - (widest === 0 ? 14 : Math.min(widest + GUTTER_PX + 2, box.width * 0.3)),
    left + 40,
  )
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
  const bands = stackBands(model, box.height, type, isFireside, countRows(marks), line)
  const { fire, dose, wood } = bands
  return {
    ...box,
    ...bands,
    left,
    right,
    marks,
    ticksC,
    toX,
    ticksS: timeTicksS(model.xMaxS, right - left, type.axis.px * 4.4),
    ticksMm: wood === null ? [] : depthTicksMm(model.depthMaxMm, wood.bottom - wood.top, type.axis.px * 1.4),
    toFireY: (tempC) =>
      fire.bottom - ((tempC - model.lowC) / (model.highC - model.lowC)) * (fire.bottom - fire.top),
    toDoseY: (minutes) =>
      dose === null
        ? 0
        : dose.bottom - (minutes / ((model.dose?.maxMin ?? 1) * 1.08)) * (dose.bottom - dose.top),
    toWoodY: (depthMm) =>
      wood === null ? 0 : wood.top + (depthMm / model.depthMaxMm) * (wood.bottom - wood.top),
  }
}

function countRows(marks: readonly PlacedWords[]): number {
  return marks.reduce((most, mark) => Math.max(most, mark.row + 1), 0)
}

/** Heights from the top: stage names, fire, words of the marks, dose, wood, time axis. */
function stackBands(
  model: PairModel,
  height: number,
  type: PairType,
  isFireside: boolean,
  markRows: number,
  line: number,
) {
  const stageHeight = model.stages.length === 0 ? 8 : type.stage.px * 1.9
  const seamHeight = markRows === 0 ? 12 : markRows * line + line * 0.45
  const hasWoodTitle = model.wood !== null && !isFireside && model.size === 'large'
  const axisHeight = line * 1.05
  const doseTitle = model.dose === null ? 0 : line * 1.35
  const woodTitle = hasWoodTitle ? line * 1.5 : 0
  const free = Math.max(height - stageHeight - seamHeight - axisHeight - doseTitle - woodTitle, 60)
  const doseHeight = model.dose === null ? 0 : Math.max(free * 0.13, 28)
  const woodHeight = model.wood === null ? 0 : (free - doseHeight) * (isFireside ? 0.3 : 0.29)
  const fire = { top: stageHeight, bottom: stageHeight + free - doseHeight - woodHeight }
  const seamTop = fire.bottom
  const doseTop = seamTop + seamHeight + doseTitle
  const woodTop = doseTop + doseHeight + woodTitle
  return {
    stageBaseline: type.stage.px * 1.15,
    fire,
    markBaselines: Array.from({ length: markRows }, (_, row) => seamTop + line * (row + 0.86)),
    doseTitleBaseline: doseTop - doseTitle * 0.38,
    dose: model.dose === null ? null : { top: doseTop, bottom: doseTop + doseHeight },
    woodTitleBaseline: hasWoodTitle ? woodTop - woodTitle * 0.38 : null,
    wood: model.wood === null ? null : { top: woodTop, bottom: woodTop + woodHeight },
    axisBaseline: height - axisHeight * 0.22,
  }
}
