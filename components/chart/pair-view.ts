import { drawOver } from './draw-over'
import { drawUnder } from './draw-under'
import { createFirePlot, readPlotColours } from './fire-plot'
import { createLiveModel } from './live-model'
import { choosePairType, layOutPair } from './pair-layout'
import type { PairLayout } from './pair-layout'
import { buildPairModel } from './pair-model'
import type { ModelWood, PairModel } from './pair-model'
import type { PairScene } from './pair-scene'
import type { PairHandle, PairProps } from './pair-types'
import { paintSvgLayer } from './svg-layer'
import { createTextMeasure } from './text-measure'
import { paintWood } from './wood-picture'

type PairParts = {
  root: HTMLElement
  under: SVGSVGElement
  plot: HTMLElement
  wood: HTMLCanvasElement
  over: SVGSVGElement
  measure: SVGSVGElement
}

/** The layers, from the bottom: rules and bands, fire lines, wood pixels, words. */
function createParts(root: HTMLElement): PairParts {
  const layer = () => {
    const svg = document.createElementNS('http://www.w3.org/2000/svg', 'svg')
    svg.setAttribute('class', 'absolute top-0 left-0')
    return svg
  }
  const parts = {
    root,
    under: layer(),
    plot: document.createElement('div'),
    wood: document.createElement('canvas'),
    over: layer(),
    measure: layer(),
  }
  parts.plot.className = 'absolute'
  parts.wood.className = 'absolute'
  parts.measure.setAttribute('width', '0')
  parts.measure.setAttribute('height', '0')
  root.replaceChildren(parts.under, parts.plot, parts.wood, parts.over, parts.measure)
  return parts
}

export type PairView = PairHandle & {
  setProps: (props: PairProps) => void
  /** Where the pointer rests, as a share of the width in px from the left; null when it left. */
  point: (xPx: number | null) => void
  onLayout: (listener: (layout: PairLayout, model: PairModel) => void) => void
  destroy: () => void
}

/**
 * The large and medium pair on the page: two SVG layers for words and rules, uPlot for the lines, a canvas for
 * the wood. Whatever changes, it is drawn once, in the next animation frame.
 */
export function createPairView(root: HTMLElement, firstProps: PairProps): PairView {
  const parts = createParts(root)
  const text = createTextMeasure(parts.measure)
  const plot = createFirePlot(parts.plot)
  const live = createLiveModel(buildPairModel(firstProps))
  let box = { width: 0, height: 0 }
  let ground = readGround(root)
  let pointedPx: number | null = null
  let frame = 0
  let isGone = false
  let paintedWood: PaintedWood | null = null
  let tellLayout: ((layout: PairLayout, model: PairModel) => void) | null = null

  function draw() {
    frame = 0
    if (isGone || box.width === 0 || box.height === 0) return
    const model = live.read()
    const { isFireside, colours } = ground
    const type = choosePairType(isFireside, model.size)
    const layout = layOutPair(model, box, type, isFireside, text.measure)
    const pointedS = pointedPx === null ? null : toPointedS(layout, model, pointedPx)
    const scene: PairScene = { model, layout, type, isFireside, measure: text.measure, pointedS }
    placeParts(parts, layout)
    paintSvgLayer(parts.under, drawUnder(scene))
    plot.draw(model, layout, colours, isFireside)
    paintedWood = drawWoodCanvas(parts.wood, model, layout, paintedWood)
    paintSvgLayer(parts.over, drawOver(scene))
    tellLayout?.(layout, model)
  }

  function schedule() {
    if (frame === 0 && !isGone) frame = requestAnimationFrame(draw)
  }

  // Sizes and colours are read here, not in the frame, where reading them would force the page's layout.
  const sizes = new ResizeObserver(([entry]) => {
    if (entry !== undefined) box = { width: entry.contentRect.width, height: entry.contentRect.height }
    ground = readGround(parts.root)
    schedule()
  })
  sizes.observe(parts.root)
  const density = watchDensity(() => {
    paintedWood = null
    schedule()
  })
  void document.fonts?.ready.then(() => {
    text.forget()
    schedule()
  })

  return {
    push: (readings) => {
      for (const reading of readings) live.push(reading)
      schedule()
    },
    pushWood: (column) => {
      live.pushWood(column)
      schedule()
    },
    setNow: (nowS) => {
      live.setNow(nowS)
      schedule()
    },
    setFuture: (future) => {
      live.setFuture(future ?? null)
      schedule()
    },
    setProps: (props) => {
      live.render(buildPairModel(props))
      schedule()
    },
    point: (xPx) => {
      pointedPx = xPx
      schedule()
    },
    onLayout: (listener) => {
      tellLayout = listener
    },
    destroy: () => {
      isGone = true
      cancelAnimationFrame(frame)
      sizes.disconnect()
      density.stop()
      plot.destroy()
    },
  }
}

function readGround(root: HTMLElement) {
  const isFireside = root.closest('[data-ground]')?.getAttribute('data-ground') === 'fireside'
  return { isFireside, colours: readPlotColours(root) }
}

function toPointedS(layout: PairLayout, model: PairModel, xPx: number): number | null {
  if (xPx < layout.left || xPx > layout.right) return null
  return Math.round(((xPx - layout.left) / (layout.right - layout.left)) * model.xMaxS)
}

/** Sets what differs: writing an equal value would still cost the page a layout. */
function placeParts(parts: PairParts, layout: PairLayout) {
  for (const layer of [parts.under, parts.over]) {
    setAttribute(layer, 'width', String(layout.width))
    setAttribute(layer, 'height', String(layout.height))
  }
  setStyle(parts.plot, 'left', `${layout.left}px`)
  setStyle(parts.plot, 'top', `${layout.fire.top}px`)
}

function setAttribute(element: Element, name: string, value: string) {
  if (element.getAttribute(name) !== value) element.setAttribute(name, value)
}

function setStyle(element: HTMLElement, name: 'left' | 'top' | 'width' | 'height', value: string) {
  if (element.style[name] !== value) element.style[name] = value
}

type PaintedWood = {
  log10Dose: ModelWood['log10Dose']
  times: Float64Array
  width: number
  height: number
  depthMaxMm: number
}

/** Repaints the pixels only when the picture or its size has changed; else it just stays. */
function drawWoodCanvas(
  canvas: HTMLCanvasElement,
  model: PairModel,
  layout: PairLayout,
  before: PaintedWood | null,
): PaintedWood | null {
  const { wood } = model
  const isHidden = wood === null || layout.wood === null || wood.times.length < 2
  if (canvas.hidden !== isHidden) canvas.hidden = isHidden
  if (wood === null || layout.wood === null || wood.times.length < 2) return null
  const startX = layout.toX(wood.times[0] ?? 0)
  const widthPx = layout.toX(wood.times.at(-1) ?? 0) - startX
  const heightPx = layout.wood.bottom - layout.wood.top
  const ratio = Math.min(window.devicePixelRatio || 1, 2)
  const width = Math.max(Math.round(widthPx * ratio), 1)
  const height = Math.max(Math.round(heightPx * ratio), 1)
  setStyle(canvas, 'left', `${startX}px`)
  setStyle(canvas, 'top', `${layout.wood.top}px`)
  setStyle(canvas, 'width', `${widthPx}px`)
  setStyle(canvas, 'height', `${heightPx}px`)
  const painted = {
    log10Dose: wood.log10Dose,
    times: wood.times,
    width,
    height,
    depthMaxMm: model.depthMaxMm,
  }
  if (before !== null && isSamePicture(before, painted)) return before
  const context = canvas.getContext('2d')
  if (context === null) return null
  canvas.width = width
  canvas.height = height
  const pixels = paintWood(wood, width, height, model.depthMaxMm)
  context.putImageData(new ImageData(new Uint8ClampedArray(pixels.buffer), width, height), 0, 0)
  return painted
}

function isSamePicture(a: PaintedWood, b: PaintedWood): boolean {
  return (
    a.log10Dose === b.log10Dose &&
    a.times === b.times &&
    a.width === b.width &&
    a.height === b.height &&
    a.depthMaxMm === b.depthMaxMm
  )
}

/** Calls back when the page moves to a screen of another pixel density or is zoomed. */
function watchDensity(onChange: () => void): { stop: () => void } {
  let query: MediaQueryList | null = null
  const change = () => {
    onChange()
    listen()
  }
  function listen() {
    query?.removeEventListener('change', change)
    query = window.matchMedia(`(resolution: ${window.devicePixelRatio || 1}dppx)`)
    query.addEventListener('change', change)
  }
  listen()
  return { stop: () => query?.removeEventListener('change', change) }
}
