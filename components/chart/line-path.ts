import { roundPx } from './round-px'

/** The part of a path that lines need: a Path2D, a canvas context, or an SVG string writer. */
export type PathSink = { moveTo: (x: number, y: number) => void; lineTo: (x: number, y: number) => void }

/**
 * Draws a line through points in time order. NaN is a gap. Where more than one point falls on a pixel column
 * only its first, lowest, highest and last are drawn, so that no extreme is lost; a lone point between two
 * gaps is drawn as a dash one pixel wide, so that it is seen.
 */
export function traceLine(
  sink: PathSink,
  times: ArrayLike<number>,
  values: ArrayLike<number>,
  toX: (time: number) => number,
  toY: (value: number) => number,
  columnPx = 1,
): void {
  let column: Column | null = null
  let isDown = false
  const flush = () => {
    if (column === null) return
    isDown = drawColumn(sink, column, isDown)
    column = null
  }
  const lift = () => {
    const wasLone = column !== null && !isDown && column.count === 1
    const lone = column
    flush()
    if (wasLone && lone !== null) sink.lineTo(lone.firstX + 1, lone.firstY)
    isDown = false
  }
  for (let i = 0; i < times.length; i += 1) {
    const value = values[i] ?? NaN
    if (Number.isNaN(value)) {
      lift()
      continue
    }
    const x = toX(times[i] ?? NaN)
    const y = toY(value)
    const index = Math.floor(x / columnPx)
    if (column !== null && column.index === index) {
      widen(column, x, y)
    } else {
      flush()
      column = {
        index,
        count: 1,
        firstX: x,
        firstY: y,
        lastX: x,
        lastY: y,
        top: y,
        topX: x,
        bottom: y,
        bottomX: x,
      }
    }
  }
  lift()
}

type Column = {
  index: number
  count: number
  firstX: number
  firstY: number
  lastX: number
  lastY: number
  top: number
  topX: number
  bottom: number
  bottomX: number
}

function widen(column: Column, x: number, y: number) {
  column.count += 1
  column.lastX = x
  column.lastY = y
  if (y < column.top) {
    column.top = y
    column.topX = x
  }
  if (y > column.bottom) {
    column.bottom = y
    column.bottomX = x
  }
}

function drawColumn(sink: PathSink, column: Column, isDown: boolean): boolean {
  if (isDown) sink.lineTo(column.firstX, column.firstY)
  else sink.moveTo(column.firstX, column.firstY)
  if (column.count > 2) {
    const isTopFirst = column.topX <= column.bottomX
    if (isTopFirst) sink.lineTo(column.topX, column.top)
    sink.lineTo(column.bottomX, column.bottom)
    if (!isTopFirst) sink.lineTo(column.topX, column.top)
  }
  if (column.count > 1) sink.lineTo(column.lastX, column.lastY)
  return true
}

/** Writes SVG path data, to a tenth of a pixel. */
export function createSvgSink(): PathSink & { data: () => string } {
  let data = ''
  const write = (letter: string) => (x: number, y: number) => {
    data += `${letter}${roundPx(x)} ${roundPx(y)}`
  }
  return { moveTo: write('M'), lineTo: write('L'), data: () => data }
}
