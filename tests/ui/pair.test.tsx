import { cleanup, fireEvent, render, screen } from '@testing-library/react'
import fc from 'fast-check'
import { renderToStaticMarkup } from 'react-dom/server'
import { afterEach, describe, expect, test } from 'vitest'
import { drawOver } from '@/components/chart/draw-over'
import { drawUnder } from '@/components/chart/draw-under'
import { DragHandles } from '@/components/chart/drag-handles'
import { snapDrag, snapPoint } from '@/components/chart/drag-snap'
import { createSvgSink, traceLine } from '@/components/chart/line-path'
import { createLiveModel } from '@/components/chart/live-model'
import { Pair } from '@/components/chart/pair'
import { choosePairType, layOutPair } from '@/components/chart/pair-layout'
import type { MeasureText } from '@/components/chart/pair-layout'
import { buildPairModel } from '@/components/chart/pair-model'
import { valueAt } from '@/lib/science/straight-line'
import { temperatureTicksC, timeTicksS } from '@/components/chart/pair-scales'
import type { DraggedPoint, PairProps } from '@/components/chart/pair-types'
import { paintSvgLayer } from '@/components/chart/svg-layer'
import type { SvgNode } from '@/components/chart/svg-layer'
import { contourWood, paintWood } from '@/components/chart/wood-picture'
import { woodColour } from '@/components/chart/wood-scale'
import { toShownTemp } from '@/lib/format'

afterEach(cleanup)

const measure: MeasureText = (words, style) => words.length * style.px * 0.56

/** Two columns a minute over ten minutes, four depths; the dose grows from the face. */
const wood = {
  timesS: [0, 300, 600],
  depthsMm: [0, 5, 10, 15],
  log10Dose: [-Infinity, -Infinity, -Infinity, -Infinity, 0, -2, -Infinity, -Infinity, 1, 0, -2, -Infinity],
  isotherm100Mm: [null, 4, 16],
  isotherm150Mm: [null, null, 4],
  toastDepthMm: [0, 3, { low: 7.2, value: 8, high: 8.9 }],
}

const base: PairProps = {
  size: 'large',
  title: 'Barrel A',
  planBand: [
    { timeS: 0, lowC: 53, midC: 60, highC: 67 },
    { timeS: 600, lowC: 183, midC: 190, highC: 197 },
  ],
  stages: [
    { name: 'Warm', startS: 0, endS: 300, minutes: 5 },
    { name: 'Hold', startS: 300, endS: 600, minutes: 5, isCurrent: true },
  ],
  lead: { name: 'bilge A', timeS: [0, 300, 600], tempC: [60, 130, 188] },
  second: { name: 'bilge B', timeS: [0, 300, 600], tempC: [58, 126, 187] },
  marks: [{ timeS: 200, words: 'feed' }],
  wood,
  unit: 'C',
}

function scene(props: PairProps, { width = 900, height = 600, isFireside = false } = {}) {
  const model = buildPairModel(props)
  const type = choosePairType(isFireside, model.size)
  const layout = layOutPair(model, { width, height }, type, isFireside, measure)
  return { model, layout, type, isFireside, measure, pointedS: null }
}

const texts = (nodes: readonly SvgNode[]) => nodes.flatMap((node) => (node.tag === 'text' ? [node] : []))
const words = (nodes: readonly SvgNode[]) => texts(nodes).map((node) => node.words)

/** The box that a text node covers. */
function boxOf(node: ReturnType<typeof texts>[number]) {
  const px = Number(node.attributes['font-size'])
  const width = measure(node.words, { px, weight: 400 })
  const anchor = node.attributes['text-anchor']
  const x = Number(node.attributes.x) - (anchor === 'end' ? width : anchor === 'middle' ? width / 2 : 0)
  const y = Number(node.attributes.y)
  return { words: node.words, left: x, right: x + width, top: y - px * 0.75, bottom: y + px * 0.2 }
}

function collisions(nodes: readonly SvgNode[]): string[] {
  const boxes = texts(nodes).map(boxOf)
  return boxes.flatMap((a, i) =>
    boxes
      .slice(i + 1)
      .filter(
        (b) =>
          a.left < b.right - 0.5 &&
          b.left < a.right - 0.5 &&
          a.top < b.bottom - 0.5 &&
          b.top < a.bottom - 0.5,
      )
      .map((b) => `${a.words} × ${b.words}`),
  )
}

describe('the grammar of the pair', () => {
  test('names stand at the lines’ ends and over the stages; there is no legend', () => {
    const said = words(drawOver(scene(base)))
    expect(said).toEqual(
      expect.arrayContaining([
        'plan',
        'bilge A',
        'bilge B',
        'Warm',
        'Hold',
        'feed',
        'toasted 8.0 mm',
        '150°',
      ]),
    )
    expect(said.filter((each) => each === 'bilge A')).toHaveLength(1)
  })

  test('the plan is a filled band beneath everything', () => {
    const under = drawUnder(scene(base))
    expect(under.some((node) => node.tag === 'path' && node.attributes.class === 'fill-plan')).toBe(true)
  })

  test('a fresh live picture has a head and a now-line; a stale one has no head', () => {
    const head = (nowS: number) => drawOver(scene({ ...base, nowS })).filter((node) => node.tag === 'circle')
    expect(head(601)).toHaveLength(1)
    expect(head(603)).toHaveLength(1)
    expect(head(604)).toHaveLength(0)
    expect(words(drawOver(scene({ ...base, nowS: 604, xMaxS: 900 })))).toContain('10:04')
  })

  test('what is unknown is a gap, what was joined is told apart from what was measured', () => {
    const model = buildPairModel({
      ...base,
      lead: {
        name: 'a',
        timeS: [0, 1, 2, 3],
        tempC: [60, null, 62, 63],
        isInterpolated: [false, false, true, false],
      },
    })
    expect([...model.lead.temps]).toEqual([60, NaN, NaN, 63])
    expect([...(model.lead.interpolated ?? [])]).toEqual([NaN, NaN, 62, 63])
  })

  test('the limit is a dotted red line with its words', () => {
    const over = drawOver(scene({ ...base, limitC: 215 }))
    expect(words(over)).toContain('never above 215°')
    expect(
      over.some(
        (node) =>
          String(node.attributes.class).includes('stroke-red') && 'stroke-dasharray' in node.attributes,
      ),
    ).toBe(true)
  })

  test('figures are in the person’s unit, all of them', () => {
    const said = words(drawOver(scene({ ...base, limitC: 215, unit: 'F' })))
    expect(said).toContain('never above 419°')
    expect(said).toContain('302°')
    expect(said).not.toContain('180°')
  })

  test('no words at the fireside are under 17 px', () => {
    for (const size of ['large', 'medium'] as const) {
      for (const node of texts(drawOver(scene({ ...base, size, nowS: 400 }, { isFireside: true })))) {
        expect(Number(node.attributes['font-size'])).toBeGreaterThanOrEqual(17)
      }
    }
  })

  test('no two words cover each other, whatever is drawn', () => {
    const anything = fc.record({
      marks: fc.array(
        fc.record({
          timeS: fc.integer({ min: 0, max: 600 }),
          words: fc.constantFrom('feed', 'stir', 'lid off', 'turned over'),
        }),
        { maxLength: 25 },
      ),
      ends: fc.array(
        fc.record({ timeS: fc.integer({ min: 300, max: 600 }), tempC: fc.integer({ min: 150, max: 200 }) }),
        { maxLength: 5 },
      ),
      width: fc.integer({ min: 560, max: 1300 }),
      isFireside: fc.boolean(),
      nowS: fc.option(fc.integer({ min: 30, max: 600 })),
      doseMin: fc.option(fc.double({ min: 0.1, max: 40, noNaN: true })),
      unit: fc.constantFrom('C' as const, 'F' as const),
      size: fc.constantFrom('large' as const, 'medium' as const),
    })
    fc.assert(
      fc.property(anything, ({ marks, ends, width, isFireside, nowS, doseMin, unit, size }) => {
        const dose =
          doseMin === null
            ? null
            : {
                title: 'Dose at 2 mm, minutes at 200 °C',
                timesS: [0, 600],
                equivalentMin: [0, doseMin],
                plan: { timesS: [0, 600], equivalentMin: [0, 13.8] },
                target: { lowMin: 10.5, targetMin: 13.8, highMin: 18.2 },
              }
        const others = ends.map((end, i) => ({
          name: `SML-04${10 + i}-K`,
          timeS: [0, end.timeS],
          tempC: [60, end.tempC],
        }))
        const props: PairProps = { ...base, size, marks, nowS, limitC: 205, unit, dose, others }
        expect(
          collisions(drawOver(scene(props, { width, height: size === 'large' ? 640 : 340, isFireside }))),
        ).toEqual([])
      }),
      { seed: 118, numRuns: 500 },
    )
  })
})

describe('axes', () => {
  test('temperatures are those a person would say', () => {
    expect(temperatureTicksC(46, 226, 'C', 5)).toEqual([60, 100, 140, 180, 220])
    expect(temperatureTicksC(46, 226, 'F', 5).map((tick) => Math.round(toShownTemp(tick, 'F')))).toEqual([
      200, 300, 400,
    ])
  })

  test('there are never more ticks than asked for, and all lie inside', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 150 }),
        fc.integer({ min: 20, max: 300 }),
        fc.constantFrom('C' as const, 'F' as const),
        (low, span, unit) => {
          const ticks = temperatureTicksC(low, low + span, unit, 5)
          expect(ticks.length).toBeLessThanOrEqual(5)
          for (const tick of ticks) expect(tick >= low - 1e-9 && tick <= low + span + 1e-9).toBe(true)
        },
      ),
      { seed: 2, numRuns: 300 },
    )
  })

  test('minutes keep their distance', () => {
    expect(timeTicksS(2700, 750, 60).map((tick) => tick / 60)).toEqual([0, 5, 10, 15, 20, 25, 30, 35, 40, 45])
    expect(timeTicksS(2700, 300, 60).map((tick) => tick / 60)).toEqual([0, 10, 20, 30, 40])
  })
})

describe('drawing a line', () => {
  const trace = (times: number[], values: number[], columnPx = 1) => {
    const sink = createSvgSink()
    traceLine(
      sink,
      times,
      values,
      (x) => x,
      (y) => y,
      columnPx,
    )
    return sink.data()
  }

  test('a gap lifts the pen, and a lone reading is still seen', () => {
    expect(trace([0, 10, 20, 30], [1, 2, NaN, 4])).toBe('M0 1L10 2M30 4L31 4')
    expect(trace([0, 10, 20], [NaN, 5, NaN])).toBe('M10 5L11 5')
  })

  test('no extreme is lost, however many readings fall on a pixel', () => {
    const value = fc.integer({ min: -50, max: 300 })
    fc.assert(
      fc.property(fc.array(value, { minLength: 1, maxLength: 400 }), (values) => {
        const times = values.map((_, i) => i / 50)
        const drawn = [...trace(times, values).matchAll(/[ML](-?[\d.]+) (-?[\d.]+)/g)].map((match) =>
          Number(match[2]),
        )
        expect(Math.max(...drawn)).toBe(Math.max(...values))
        expect(Math.min(...drawn)).toBe(Math.min(...values))
        expect(drawn.length).toBeLessThanOrEqual(4 * (Math.ceil(values.length / 50) + 1) + 1)
      }),
      { seed: 9, numRuns: 300 },
    )
  })

  test('a value between two readings lies straight between them; beside a gap there is none', () => {
    expect(valueAt([0, 10], [100, 120], 2.5)).toBe(105)
    expect(valueAt([0, 10, 20], [100, NaN, 120], 5)).toBeNaN()
    expect(valueAt([0, 10], [100, 120], 11)).toBeNaN()
  })
})

describe('the wood', () => {
  const model = buildPairModel(base)
  const known = model.wood
  if (known === null) throw new Error('no wood')

  test('is raw oak where nothing counted and darkens towards the face', () => {
    const pixels = new Uint8Array(paintWood(known, 60, 30, 15).buffer)
    const redAt = (x: number, y: number) => pixels[(y * 60 + x) * 4] ?? -1
    expect(redAt(0, 29)).toBe(0xea)
    expect(redAt(59, 0)).toBeLessThan(redAt(59, 15))
    expect(redAt(59, 15)).toBeLessThan(redAt(59, 29))
    expect(redAt(59, 0)).toBeLessThan(redAt(10, 0))
  })

  test('areas of a higher dose lie within those of a lower', () => {
    const contours = contourWood(known, 24, woodColour)
    expect(contours.length).toBeGreaterThan(5)
    contours.forEach((contour, i) => {
      if (i > 0)
        contour.depthsMm.forEach((depth, column) =>
          expect(depth).toBeLessThanOrEqual(contours[i - 1]?.depthsMm[column] ?? 0),
        )
    })
  })
})

describe('what is pushed to a live picture', () => {
  test('joins what was rendered, in order and once, and survives a render with an older copy', () => {
    const rendered = buildPairModel({ ...base, nowS: 600 })
    const live = createLiveModel(rendered)
    live.push({ timeS: 601, leadC: 189 })
    live.push({ timeS: 603, leadC: 190 })
    live.push({ timeS: 602, leadC: null })
    live.push({ timeS: 603, leadC: 191 })
    live.setNow(603)
    live.render(buildPairModel({ ...base, nowS: 600 }))
    const { lead, second, nowS } = live.read()
    expect([...lead.times]).toEqual([0, 300, 600, 601, 602, 603])
    expect([...lead.temps].slice(3)).toEqual([189, NaN, 191])
    expect(nowS).toBe(603)
    expect(second).toEqual(rendered.second)
  })

  test('never shrinks the picture’s range, and widens it for a reading outside', () => {
    const rendered = buildPairModel(base)
    const live = createLiveModel(rendered)
    live.push({ timeS: 601, leadC: 260 })
    const { lowC, highC } = live.read()
    expect(highC).toBeGreaterThan(260)
    expect(lowC).toBe(rendered.lowC)
  })

  test('a column of wood is added, and a repeat of the last replaces it', () => {
    const live = createLiveModel(buildPairModel(base))
    const column = {
      timeS: 660,
      log10Dose: [1, 0, -1, -2],
      isotherm100Mm: 17,
      isotherm150Mm: 5,
      toastDepthMm: 9,
    }
    live.pushWood(column)
    live.pushWood({ ...column, toastDepthMm: 9.5 })
    const { wood: now } = live.read()
    expect([...(now?.times ?? [])]).toEqual([0, 300, 600, 660])
    expect(now?.toastDepthMm.at(-1)).toBe(9.5)
    expect(now?.log10Dose.length).toBe(16)
  })

  test('overtime lengthens the axis in steps of five minutes', () => {
    const live = createLiveModel(buildPairModel(base))
    live.setNow(601)
    expect(live.read().xMaxS).toBe(900)
  })
})

describe('dragging a corner of the plan', () => {
  const frame = { left: 40, top: 30, width: 600, height: 400, xMaxS: 1200, lowC: 50, highC: 250 }
  const times = [0, 600, 1200]

  test('snaps to 1 °C and half a minute and keeps the order, wherever the pointer goes', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 2 }),
        fc.double({ min: -500, max: 1500, noNaN: true }),
        fc.double({ min: -500, max: 900, noNaN: true }),
        (pointIndex, xPx, yPx) => {
          const point = snapDrag(frame, pointIndex, times, { xPx, yPx })
          expect(point.timeS % 30).toBe(0)
          expect(Number.isInteger(point.tempC)).toBe(true)
          if (pointIndex === 0) expect(point.timeS).toBe(0)
          else expect(point.timeS).toBeGreaterThan(times[pointIndex - 1] ?? 0)
          if (pointIndex === 1) expect(point.timeS).toBeLessThan(1200)
        },
      ),
      { seed: 5, numRuns: 300 },
    )
  })

  test('a key moves it by one step', () => {
    expect(snapPoint(1, times, 630, 151)).toEqual({ pointIndex: 1, timeS: 630, tempC: 151 })
  })
})

describe('for those who do not see it', () => {
  test('the picture has a sentence, a table and its marks', () => {
    render(<Pair {...base} />)
    expect(screen.getByRole('img').getAttribute('aria-label')?.replaceAll('\u00a0', ' ')).toBe(
      'Barrel A. Wood temperature over 10 minutes. bilge A: last 10:00, 188 °C. Stage Hold. By the model toasted 8.0 mm.',
    )
    expect(screen.getAllByRole('row')).toHaveLength(4)
    expect(screen.getByRole('list', { name: 'Marks' }).textContent).toBe('3:20 feed')
  })

  test('the corners of a plan are reached, read and moved by keyboard', () => {
    const moved: DraggedPoint[] = []
    const frame = { left: 40, top: 30, width: 600, height: 400, xMaxS: 600, lowC: 40, highC: 220 }
    render(
      <DragHandles
        frame={frame}
        lead={base.lead}
        stages={base.stages}
        unit="F"
        onDragPoint={(point) => moved.push(point)}
      />,
    )
    const corner = screen.getByRole('slider', { name: 'End of Warm' })
    expect(corner.getAttribute('tabindex')).toBe('0')
    expect(corner.getAttribute('aria-valuetext')?.replaceAll('\u00a0', ' ')).toBe('266 °F at 5:00')
    fireEvent.keyDown(corner, { key: 'ArrowUp' })
    fireEvent.keyDown(corner, { key: 'ArrowRight' })
    expect(moved).toEqual([
      { pointIndex: 1, timeS: 300, tempC: 131 },
      { pointIndex: 1, timeS: 330, tempC: 130 },
    ])
  })
})

describe('the small pair', () => {
  test('is drawn on the server, without an inline style that a content policy would refuse', () => {
    const markup = renderToStaticMarkup(<Pair {...base} size="small" nowS={601} />)
    expect(markup).toContain('<svg')
    expect(markup).toContain('<circle')
    expect(markup).not.toContain('style=')
  })

  test('without any reading it shows the plan alone', () => {
    const markup = renderToStaticMarkup(
      <Pair {...base} size="small" lead={{ name: 'a', timeS: [], tempC: [] }} second={null} wood={null} />,
    )
    expect(markup).toContain('fill-plan')
    expect(markup).toContain('No reading yet.')
  })
})

test('the overlay touches only what differs', () => {
  const layer = document.createElementNS('http://www.w3.org/2000/svg', 'svg')
  const text = (said: string): SvgNode => ({ tag: 'text', words: said, attributes: { x: 1, y: 2 } })
  paintSvgLayer(layer, [text('feed'), text('stir')])
  const first = layer.firstChild
  paintSvgLayer(layer, [text('feed')])
  expect(layer.firstChild).toBe(first)
  expect(layer.textContent).toBe('feed')
  paintSvgLayer(layer, [{ tag: 'circle', attributes: { r: 3 } }])
  expect(layer.firstElementChild?.tagName).toBe('circle')
})
