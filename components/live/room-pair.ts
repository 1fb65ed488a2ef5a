import type { PairProps } from '@/components/chart/pair-types'
import type { TemperatureUnit } from '@/lib/format'
import type { FiringDto } from '@/lib/firings/schema'
import { planOf } from '@/lib/recipes/plan-of'
import type { Plan } from '@/lib/recipes/plan-of'
import type { SiteRules } from '@/lib/science/site-rules'
import { staveHistory } from '@/lib/science/stave'

export type RoomCurve = { timeS: number[]; tempC: (number | null)[] }
export type RoomPlan = Pick<Plan, 'band' | 'stages' | 'totalS'>

const COLUMNS = 60
const nothing: RoomCurve = { timeS: [], tempC: [] }

export function roomPlanOf(firing: FiringDto, rules: SiteRules): Plan | null {
  return firing.recipeCopy === null ? null : planOf(firing.recipeCopy.content, rules.dose)
}

/** The small pair of a hearth: the lead against its plan, and the wood under it by the stave model. */
export function roomPair(
  firing: FiringDto,
  plan: Plan,
  curve: RoomCurve | null,
  nowS: number | null,
  options: { rules: SiteRules; unit: TemperatureUnit },
): PairProps {
  const toast = fromToastStart(curve ?? nothing)
  return {
    size: 'small',
    title: `Barrel ${firing.piece.serial}`,
    unit: options.unit,
    planBand: plan.band,
    stages: [],
    lead: { name: 'lead', timeS: toast.timeS, tempC: toast.tempC },
    wood: roomWood(firing, toast, options.rules),
    nowS,
    xMaxS: Math.max(plan.totalS, nowS ?? 0),
  }
}

function fromToastStart(curve: RoomCurve): RoomCurve {
  const first = curve.timeS.findIndex((timeS) => timeS >= 0)
  if (first <= 0) return first === 0 ? curve : nothing
  return { timeS: curve.timeS.slice(first), tempC: curve.tempC.slice(first) }
}

function roomWood(firing: FiringDto, curve: RoomCurve, rules: SiteRules): PairProps['wood'] {
  const content = firing.recipeCopy?.content
  const points = curve.timeS.flatMap((timeS, i) => {
    const tempC = curve.tempC[i]
    return tempC === null || tempC === undefined ? [] : [{ timeS, tempC }]
  })
  const [first] = points
  const last = points.at(-1)
  if (content === undefined || first === undefined || last === undefined || last.timeS - first.timeS < 30) {
    return emptyWood
  }
  return staveHistory({
    thicknessMm: content.thicknessMm,
    probeDepthMm: content.leadPlace.depthMm,
    moisturePercent: firing.moisturePercent ?? rules.stave.moisturePercent,
    specificGravity: rules.stave.specificGravity,
    roomTempC: rules.stave.roomTempC,
    coldFaceHWPerM2K: rules.stave.coldFaceHWPerM2K,
    dose: rules.dose,
    toastDepthDoseMin: rules.stave.toastDepthDoseMin,
    probeDepthErrorMm: rules.stave.probeDepthErrorMm,
    diffusivityErrorShare: rules.stave.diffusivityErrorShare,
    points,
    columns: COLUMNS,
  })
}

/** Keeps the wood's place in the row before there is any. */
const emptyWood: NonNullable<PairProps['wood']> = {
  timesS: [0],
  depthsMm: [0, 15],
  log10Dose: [-Infinity, -Infinity],
  isotherm100Mm: [null],
  isotherm150Mm: [null],
  toastDepthMm: [null],
}
