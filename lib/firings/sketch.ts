import * as z from 'zod'
import type { Plan } from '@/lib/recipes/plan-of'
import type { StaveHistory } from '@/lib/science/stave'

/** The small pair of a list row: a few dozen points, rounded, stored beside the score. Times in s from toast start. */
export const sketchSchema = z.object({
  timeS: z.array(z.number()),
  tempC: z.array(z.number().nullable()),
  band: z.array(z.object({ timeS: z.number(), lowC: z.number(), midC: z.number(), highC: z.number() })),
  wood: z
    .object({
      timesS: z.array(z.number()),
      depthsMm: z.array(z.number()),
      /** null stands for no dose at all. */
      log10Dose: z.array(z.number().nullable()),
      toastDepthMm: z.array(z.number()),
    })
    .nullable(),
})
export type Sketch = z.infer<typeof sketchSchema>

const curvePoints = 72
const woodColumns = 26
const depthStepMm = 1.5

const toTenth = (value: number) => Math.round(value * 10) / 10

/** A plan's band with its middle, as the pair draws it. */
export function bandOf(plan: Plan): Sketch['band'] {
  return plan.band.map((point) => ({ ...point, midC: (point.lowC + point.highC) / 2 }))
}

/** Every n-th reading; a sketch is too small for an extreme to show. */
export function thinCurve(
  timeS: ArrayLike<number>,
  tempC: ArrayLike<number>,
): Pick<Sketch, 'timeS' | 'tempC'> {
  const count = Math.min(curvePoints, timeS.length)
  const picked = Array.from({ length: count }, (_, i) =>
    Math.round((i * (timeS.length - 1)) / Math.max(1, count - 1)),
  )
  return {
    timeS: picked.map((i) => Math.round(timeS[i] ?? 0)),
    tempC: picked.map((i) => {
      const value = tempC[i] ?? Number.NaN
      return Number.isNaN(value) ? null : toTenth(value)
    }),
  }
}

type ThinnedWood = {
  timesS: ArrayLike<number>
  depthsMm: readonly number[]
  log10Dose: ArrayLike<number>
  toastDepthMm: readonly { value: number }[]
}

function thinWood(history: ThinnedWood): NonNullable<Sketch['wood']> {
  const fromColumns = history.timesS.length
  const stepMm = (history.depthsMm[1] ?? 1) - (history.depthsMm[0] ?? 0)
  const everyDepth = Math.max(1, Math.round(depthStepMm / stepMm))
  const depths = history.depthsMm.map((_, row) => row).filter((row) => row % everyDepth === 0)
  const columns = Array.from({ length: Math.min(woodColumns, fromColumns) }, (_, i, all = woodColumns) =>
    Math.round((i * (fromColumns - 1)) / (all - 1)),
  )
  return {
    timesS: columns.map((column) => Math.round(history.timesS[column] ?? 0)),
    depthsMm: depths.map((row) => history.depthsMm[row] ?? 0),
    log10Dose: columns.flatMap((column) =>
      depths.map((row) => {
        const value = history.log10Dose[column * history.depthsMm.length + row] ?? -Infinity
        return value > -3 ? toTenth(value) : null
      }),
    ),
    toastDepthMm: columns.map((column) => toTenth(history.toastDepthMm[column]?.value ?? 0)),
  }
}

type Column = { atS: number; depthsMm: number[]; log10Dose: number[]; toastDepthMm: number | null }

/** The wood of a live firing, from the columns that the hub keeps; null before there are two. */
export function thinColumns(columns: readonly Column[]): Sketch['wood'] {
  const depthsMm = columns[0]?.depthsMm ?? []
  if (columns.length < 2 || depthsMm.length < 2) return null
  return thinWood({
    timesS: columns.map((column) => column.atS),
    depthsMm,
    log10Dose: columns.flatMap((column) => column.log10Dose),
    toastDepthMm: columns.map((column) => ({ value: column.toastDepthMm ?? 0 })),
  })
}

/** The sketch of a finished firing, or of a plan alone. */
export function makeSketch(
  plan: Plan,
  lead: { timeS: ArrayLike<number>; tempC: ArrayLike<number> },
  history: StaveHistory | null,
): Sketch {
  return {
    ...thinCurve(lead.timeS, lead.tempC),
    band: bandOf(plan),
    wood: history === null ? null : thinWood(history),
  }
}
