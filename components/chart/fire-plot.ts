import uPlot from 'uplot'
import { traceLine } from './line-path'
import type { PairLayout } from './pair-layout'
import type { ModelLine, PairModel } from './pair-model'

/** Colours as the ground has them, read from the page's own tokens. */
export type PlotColours = { text: string; soft: string; mute: string; water: string }

export function readPlotColours(element: Element): PlotColours {
  const style = getComputedStyle(element)
  const read = (name: string, fallback: string) => style.getPropertyValue(name).trim() || fallback
  return {
    text: read('--text', '#10161a'),
    soft: read('--soft', '#4f565b'),
    mute: read('--mute', '#656d73'),
    water: read('--water', '#00697b'),
  }
}

export type FirePlot = {
  /** Draws the model in the layout's fire box; everything is set once and drawn once. */
  draw: (model: PairModel, layout: PairLayout, colours: PlotColours, isFireside: boolean) => void
  destroy: () => void
}

/** The lines of the upper picture, by uPlot on a canvas that covers just the fire's box. */
export function createFirePlot(host: HTMLElement): FirePlot {
  let plot: uPlot | null = null
  let now: { model: PairModel; layout: PairLayout; colours: PlotColours; isFireside: boolean } | null = null

  const paths: uPlot.Series.PathBuilder = (u) => {
    const stroke = new Path2D()
    if (now !== null) trace(u, stroke, now.model.lead.times, now.model.lead.temps)
    return { stroke, fill: null, clip: null, band: null, flags: 0 }
  }

  function start(width: number, height: number): uPlot {
    const options: uPlot.Options = {
      width,
      height,
      padding: [0, 0, 0, 0],
      legend: { show: false },
      cursor: { show: false },
      scales: {
        x: { time: false, auto: false, range: () => [0, now?.model.xMaxS ?? 1] },
        y: { auto: false, range: () => [now?.model.lowC ?? 0, now?.model.highC ?? 1] },
      },
      axes: [{ show: false }, { show: false }],
      series: [
        {},
        {
          points: { show: false },
          stroke: () => now?.colours.text ?? '#000000',
          width: now?.isFireside ? 3.5 : 2.4,
          paths,
        },
      ],
      hooks: {
        drawClear: [(u) => now !== null && drawThinLines(u, now.model, now.colours)],
        draw: [(u) => now !== null && drawDottedAndDashed(u, now.model, now.colours, now.isFireside)],
      },
    }
    return new uPlot(options, [[0], [null]], host)
  }

  return {
    draw(model, layout, colours, isFireside) {
      now = { model, layout, colours, isFireside }
      const width = Math.max(Math.round(layout.right - layout.left), 1)
      const height = Math.max(Math.round(layout.fire.bottom - layout.fire.top), 1)
      if (plot === null) plot = start(width, height)
      if (plot.width !== width || plot.height !== height) plot.setSize({ width, height })
      const { times, temps } = model.lead
      plot.batch(() => {
        plot?.setData(times.length === 0 ? [[0], [null]] : [times, temps], false)
        plot?.setScale('x', { min: 0, max: model.xMaxS })
        plot?.setScale('y', { min: model.lowC, max: model.highC })
      })
    },
    destroy() {
      plot?.destroy()
      plot = null
    },
  }
}

function trace(u: uPlot, path: Path2D, times: Float64Array, temps: Float64Array) {
  const toX = (timeS: number) => u.valToPos(timeS, 'x', true)
  const toY = (tempC: number) => u.valToPos(tempC, 'y', true)
  traceLine(path, times, temps, toX, toY)
}

function strokeLine(
  u: uPlot,
  line: { times: Float64Array; temps: Float64Array },
  colour: string,
  widthPx: number,
  dash: readonly number[] = [],
) {
  const path = new Path2D()
  trace(u, path, line.times, line.temps)
  const { ctx } = u
  ctx.save()
  ctx.beginPath()
  ctx.rect(u.bbox.left, u.bbox.top, u.bbox.width, u.bbox.height)
  ctx.clip()
  ctx.strokeStyle = colour
  ctx.lineWidth = widthPx * uPlot.pxRatio
  ctx.lineJoin = 'round'
  ctx.setLineDash(dash.map((px) => px * uPlot.pxRatio))
  ctx.stroke(path)
  ctx.restore()
}

/** Beneath the lead: other firings or versions, then the opposite probe. */
function drawThinLines(u: uPlot, model: PairModel, colours: PlotColours) {
  for (const line of model.others) {
    strokeLine(u, line, line.isSelected ? colours.water : colours.mute, line.isSelected ? 2 : 1.1)
    strokeJoined(u, line, colours.mute, 1.1)
  }
  if (model.second === null) return
  strokeLine(u, model.second, colours.mute, 1.1)
  strokeJoined(u, model.second, colours.mute, 1.1)
}

function drawDottedAndDashed(u: uPlot, model: PairModel, colours: PlotColours, isFireside: boolean) {
  strokeJoined(u, model.lead, colours.text, isFireside ? 3 : 2)
  if (model.future !== null) strokeLine(u, model.future, colours.text, 1.5, [7, 5])
}

function strokeJoined(u: uPlot, line: ModelLine, colour: string, widthPx: number) {
  if (line.interpolated === null) return
  strokeLine(u, { times: line.times, temps: line.interpolated }, colour, widthPx, [widthPx, widthPx * 1.8])
}
