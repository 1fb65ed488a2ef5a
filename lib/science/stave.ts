import type { DoseModel } from './heat-dose'

/** A depth with its range, mm from the face, not rounded: show to 0.5 mm with `showDepthMm`. */
export type DepthRangeMm = { low: number; value: number; high: number }

/** A temperature with its range, °C. */
export type TempRangeC = { low: number; value: number; high: number }

export type StaveOptions = {
  thicknessMm: number
  /** Depth of the lead probe, mm from the face; 0 is the face itself. */
  probeDepthMm: number
  /** At the start, % of dry mass. */
  moisturePercent: number
  startTempC: number
  /** Oven-dry specific gravity. */
  specificGravity: number
  roomTempC: number
  coldFaceHWPerM2K: number
  dose: DoseModel
  toastDepthDoseMin: number
  probeDepthErrorMm: number
  diffusivityErrorShare: number
  /** Temperature error of the probe as mounted, °C, k = 2; widens the range of the toast depth. */
  probeErrorC?: number
  /** Width of the cells next to the face, mm; default 0.5. */
  cellMm?: number
}

/** What acts at the face during a step: the probe's reading (imposed at its depth), a flux, or a fire. */
export type StaveBoundary =
  | number
  | { fluxWPerM2: number }
  | { gasTempC: number; hWPerM2K: number; radiantTempC: number; emissivity: number }

export type StaveHistoryOptions = Omit<StaveOptions, 'startTempC'> & {
  points: readonly { timeS: number; tempC: number }[]
  startTempC?: number
  /** Pictures across the time axis; default 240. */
  columns?: number
}

/** Depth × time picture: `log10Dose[column * depthsMm.length + depth]`; −Infinity where nothing counted. */
export type StaveHistory = {
  timesS: number[]
  depthsMm: number[]
  log10Dose: Float32Array
  /** Deepest point at or above the isotherm per column, mm; null when none. */
  isotherm100Mm: (number | null)[]
  isotherm150Mm: (number | null)[]
  toastDepthMm: DepthRangeMm[]
}
