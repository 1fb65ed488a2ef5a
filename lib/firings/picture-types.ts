import type { AlarmDto } from '@/lib/alarms/schema'
import type { FiringDto } from '@/lib/firings/schema'
import type { ScoreDto } from '@/lib/firings/read-score'
import type { BandPoint } from '@/lib/recipes/plan-of'
import type { Gap } from '@/lib/science/gaps'
import type { Score } from '@/lib/science/score-types'
import type { SiteRules } from '@/lib/science/site-rules'

/**
 * What a page draws of one firing, thinned and rounded, all plain data. Times: s from toast start. Temperatures: °C.
 * Doses: minutes at the site's reference temperature.
 */

/** One probe's curve; extremes are kept. A short gap is joined and marked so; a long one is a null between readings. */
export type PictureSeries = {
  name: string
  timeS: number[]
  tempC: (number | null)[]
  /** Left out when nothing was joined. */
  isInterpolated?: boolean[]
}

export type PictureDose = { timesS: number[]; equivalentMin: (number | null)[] }

export type PictureStage = { name: string; startS: number; endS: number; minutes: number }

/** The stave by the model: `log10Dose[column * depthsMm.length + depth]`. */
export type PictureWood = {
  timesS: number[]
  depthsMm: number[]
  log10Dose: number[]
  isotherm100Mm: (number | null)[]
  isotherm150Mm: (number | null)[]
  toastDepthMm: { low: number; value: number; high: number }[]
}

export type FiringCurves = {
  /** Toast start. */
  zeroAt: string
  lead: PictureSeries
  opposite: PictureSeries | null
  leadGaps: Gap[]
  oppositeGaps: Gap[]
  planBand: BandPoint[]
  /** As they were matched to the toaster's marks. */
  stages: PictureStage[]
  dose: PictureDose
  planDose: PictureDose
  planDoseMin: number
  target: { lowMin: number; targetMin: number; highMin: number }
  wood: PictureWood | null
}

/** A check of one of the firing's probes that its readings were corrected by. */
export type ProbeCheckFact = {
  probeId: string
  kind: 'ice' | 'boiling' | 'block'
  referenceTempC: number
  uncertaintyC: number
  checkedAt: string
  /** It was out of date when the firing began. */
  wasOverdue: boolean
}

export type FiringPicture = {
  firing: FiringDto
  /** IANA name. */
  timeZone: string
  /** The rules that the firing was fired under. */
  rules: SiteRules
  score: (ScoreDto & { result: Score }) | null
  /** Null before the toast, and when the lead probe gave nothing. */
  curves: FiringCurves | null
  checks: ProbeCheckFact[]
  /** In the order in which they came. */
  alarms: AlarmDto[]
  isSealed: boolean
}
