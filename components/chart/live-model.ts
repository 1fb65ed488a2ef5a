import { depthValue, widenTempRange } from './pair-model'
import type { ModelLine, ModelWood, PairModel } from './pair-model'
import type { PairHandle, PairProps, WoodColumn } from './pair-types'
import { createRingBuffer } from './ring-buffer'
import type { RingBuffer } from './ring-buffer'

/** Two hours at five readings a second. */
const RING_CAPACITY = 36_000
/** An overtime firing lengthens the axis by steps, so that it does not creep. */
const AXIS_STEP_S = 300

type LiveReading = Parameters<PairHandle['push']>[0][number]

export type LiveModel = {
  /**
   * Takes what a render gives. Readings pushed before stay: a render with an older copy of the curve loses
   * nothing. Another firing is another picture: give it another React key.
   */
  render: (base: PairModel) => void
  push: (reading: LiveReading) => void
  pushWood: (column: WoodColumn) => void
  setNow: (nowS: number) => void
  setFuture: (future: NonNullable<PairProps['future']> | null) => void
  /** The rendered model with what has come since. */
  read: () => PairModel
}

/** Holds what arrives between renders. A picture that nothing is pushed to stays exactly as rendered. */
export function createLiveModel(first: PairModel): LiveModel {
  let base = first
  let { nowS, future, wood } = first
  const lead = createLiveLine()
  const second = createLiveLine()

  return {
    render(next) {
      lead.takeRendered(next.lead)
      second.takeRendered(next.second)
      if (next.nowS !== base.nowS) nowS = next.nowS
      if (next.future !== null || base.future !== null) future = next.future
      if (next.wood === null || lastTime(next.wood) >= lastTime(wood)) wood = next.wood
      base = next
    },
    push(reading) {
      if (reading.leadC !== undefined) lead.put(base.lead, reading.timeS, reading.leadC)
      if (reading.secondC !== undefined) second.put(base.second, reading.timeS, reading.secondC)
    },
    pushWood(column) {
      if (wood !== null) wood = appendColumn(wood, column)
    },
    setNow(at) {
      nowS = at
    },
    setFuture(points) {
      future = points === null ? null : toFutureLine(points)
    },
    read() {
      const leadNow = lead.read(base.lead) ?? base.lead
      const xMaxS =
        nowS !== null && nowS > base.xMaxS ? Math.ceil(nowS / AXIS_STEP_S) * AXIS_STEP_S : base.xMaxS
      const range = leadNow === base.lead ? {} : coverLatest(base, leadNow.temps)
      return { ...base, ...range, lead: leadNow, second: second.read(base.second), xMaxS, nowS, wood, future }
    },
  }
}

/** One probe's rendered curve and, once something is pushed, the ring that takes over from it. */
function createLiveLine() {
  let ring: RingBuffer | null = null
  const fill = (to: RingBuffer, line: ModelLine | null) =>
    line?.times.forEach((timeS, i) => to.put([timeS, line.temps[i] ?? NaN]))
  return {
    put(rendered: ModelLine | null, timeS: number, tempC: number | null) {
      if (ring === null) {
        ring = createRingBuffer(RING_CAPACITY, 2)
        fill(ring, rendered)
      }
      ring.put([timeS, tempC ?? NaN])
    },
    takeRendered(line: ModelLine | null) {
      if (ring !== null) fill(ring, line)
    },
    read(rendered: ModelLine | null): ModelLine | null {
      if (ring === null) return rendered
      const line = {
        name: rendered?.name ?? '',
        interpolated: null,
        isSelected: rendered?.isSelected ?? false,
      }
      return { ...line, times: ring.column(0), temps: ring.column(1) }
    },
  }
}

function lastTime(wood: ModelWood | null): number {
  return wood?.times.at(-1) ?? -Infinity
}

/** The range the render chose, widened when a reading leaves it. */
function coverLatest(base: PairModel, temps: Float64Array): { lowC: number; highC: number } {
  let low = Infinity
  let high = -Infinity
  for (const temp of temps) {
    if (temp < low) low = temp
    if (temp > high) high = temp
  }
  if (low > high || (low >= base.lowC && high <= base.highC)) return { lowC: base.lowC, highC: base.highC }
  const wide = widenTempRange(low, high)
  return {
    lowC: low < base.lowC ? wide.lowC : base.lowC,
    highC: high > base.highC ? wide.highC : base.highC,
  }
}

function toFutureLine(points: NonNullable<PairProps['future']>): ModelLine {
  return {
    name: '',
    times: Float64Array.from(points.timeS),
    temps: Float64Array.from(points.tempC),
    interpolated: null,
    isSelected: false,
  }
}

/** A new picture with one more column; a column no later than the last replaces it. */
function appendColumn(wood: ModelWood, column: WoodColumn): ModelWood {
  const keep = wood.times.filter((timeS) => timeS < column.timeS).length
  const rows = wood.depthsMm.length
  const log10Dose = new Float32Array((keep + 1) * rows)
  for (let i = 0; i < keep * rows; i += 1) log10Dose[i] = wood.log10Dose[i] ?? -Infinity
  for (let row = 0; row < rows; row += 1) log10Dose[keep * rows + row] = column.log10Dose[row] ?? -Infinity
  const append = (values: Float64Array, value: number) =>
    Float64Array.from([...values.subarray(0, keep), value])
  const toast = column.toastDepthMm
  return {
    depthsMm: wood.depthsMm,
    times: append(wood.times, column.timeS),
    log10Dose,
    isotherm100Mm: append(wood.isotherm100Mm, column.isotherm100Mm ?? NaN),
    isotherm150Mm: append(wood.isotherm150Mm, column.isotherm150Mm ?? NaN),
    toastDepthMm: append(wood.toastDepthMm, depthValue(toast)),
    lastToastRange: typeof toast === 'object' && toast !== null ? { low: toast.low, high: toast.high } : null,
  }
}
