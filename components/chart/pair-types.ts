import type { TemperatureUnit } from '@/lib/format'

/** A curve. Times in s from the toast start, never falling; null or NaN is no reading. */
export type PairSeries = {
  name: string
  timeS: ArrayLike<number>
  tempC: ArrayLike<number | null>
  /** True where the value was joined over a gap; drawn dotted. As long as `tempC`. */
  isInterpolated?: ArrayLike<boolean>
  /** Drawn in water: the one of an overlay that is chosen. */
  isSelected?: boolean
}

export type PlanBandPoint = { timeS: number; lowC: number; midC: number; highC: number }

export type PairStage = {
  name: string
  startS: number
  endS: number
  /** Shown after the name; left out where there is no room. */
  minutes?: number
  isCurrent?: boolean
  isSelected?: boolean
}

export type PairMark = { timeS: number; words: string }

/** A model figure with its range, mm from the face. */
export type PairDepth = number | { low: number; value: number; high: number } | null

/** The depth × time picture: `log10Dose[column * depthsMm.length + depth]`, minutes at 200 °C; −Infinity: none. */
export type PairWood = {
  timesS: ArrayLike<number>
  depthsMm: ArrayLike<number>
  log10Dose: ArrayLike<number>
  isotherm100Mm: ArrayLike<number | null>
  isotherm150Mm: ArrayLike<number | null>
  toastDepthMm: ArrayLike<PairDepth>
}

export type PairDoseLine = {
  name?: string
  timesS: ArrayLike<number>
  equivalentMin: ArrayLike<number | null>
}

/** The dose strip between fire and wood. */
export type PairDose = PairDoseLine & {
  /** Over the strip: "Dose at 2 mm, minutes at 200 °C". */
  title: string
  /** The last dose's k = 2 range; drawn as a stem. */
  range?: { lowMin: number; highMin: number } | null
  plan?: PairDoseLine | null
  others?: readonly PairDoseLine[]
  /** Target with its tolerance, drawn as a band. */
  target?: { lowMin: number; targetMin: number; highMin: number } | null
}

export type PairProps = {
  size: 'large' | 'medium' | 'small'
  /** What the picture is of, for those who hear it: "Barrel SML-0427-P, hearth 2". */
  title: string
  planBand: readonly PlanBandPoint[]
  /** At the band's end; default "plan". */
  planName?: string
  stages: readonly PairStage[]
  lead: PairSeries
  /** The opposite probe. */
  second?: PairSeries | null
  /** Up to six more firings or versions, each with its name at its end. */
  others?: readonly PairSeries[]
  /** What the future may be, from the head on. */
  future?: { timeS: ArrayLike<number>; tempC: ArrayLike<number> } | null
  marks?: readonly PairMark[]
  wood?: PairWood | null
  dose?: PairDose | null
  /** Live: where now is. A head and a now-line are drawn; the head only while the lead probe is fresh. */
  nowS?: number | null
  /** The end of the time axis; default the latest of plan and data. */
  xMaxS?: number
  unit: TemperatureUnit
  /** Wood never above this; a dotted red line. */
  limitC?: number | null
  /** The deepest wood shown, mm. */
  depthMaxMm?: number
  className?: string
}

export type WoodColumn = {
  timeS: number
  log10Dose: ArrayLike<number>
  isotherm100Mm: number | null
  isotherm150Mm: number | null
  toastDepthMm: PairDepth
}

/** What the fireside drives without rendering React: everything is drawn at most once a frame. */
export type PairHandle = {
  /**
   * Adds readings; an older one is put in its place, a repeat is written over. A probe left out has nothing at
   * that moment; null is no reading, and breaks its line.
   */
  push: (readings: readonly { timeS: number; leadC?: number | null; secondC?: number | null }[]) => void
  /** Adds the newest column of the wood picture; needs `wood` (empty at first will do) for its depths. */
  pushWood: (column: WoodColumn) => void
  setNow: (nowS: number) => void
  setFuture: (future: PairProps['future']) => void
}

export type DraggedPoint = { pointIndex: number; timeS: number; tempC: number }
