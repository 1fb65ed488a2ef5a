import type { PairWood } from '@/components/chart/pair-types'
import { formatDoseFigure, formatNumber, formatTemp } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { Plan } from '@/lib/recipes/plan-of'
import { planIndices } from '@/lib/recipes/plan-of'
import type { SiteRules } from '@/lib/science/site-rules'
import { CONDUCTIVITY_MOISTURE_LIMIT_PERCENT, isConductivityOutsideFormula } from '@/lib/science/wood'

function halfMm(depthMm: number): string {
  return formatNumber(Math.round(depthMm * 2) / 2, 1)
}

/** Toast depth with its range, to half a millimetre; null where the model finds none yet. */
function depthWords(wood: PairWood | null): string {
  const depth = wood === null ? null : (wood.toastDepthMm[wood.toastDepthMm.length - 1] ?? null)
  if (depth === null) return wood === null ? 'computing' : 'none'
  if (typeof depth === 'number') return `${halfMm(depth)} mm`
  return `${halfMm(depth.value)} mm (${halfMm(depth.low)} to ${halfMm(depth.high)})`
}

/** The plan's figures over the picture: dose against target, the two indices, depth, length. */
export function PlanFigures({
  plan,
  wood,
  rules,
  unit,
  depthMm,
  moisturePercent,
}: {
  plan: Plan
  wood: PairWood | null
  rules: SiteRules
  unit: TemperatureUnit
  depthMm: number
  /** Of the staves that the plan is drawn for. */
  moisturePercent: number
}) {
  const { slowMin, fastMin } = planIndices(plan.points, rules.indices, rules.dose.refTempC)
  const isOff = plan.doseMin < plan.targetLowMin || plan.doseMin > plan.targetHighMin
  return (
    <div>
      <dl className="flex flex-wrap gap-x-6 gap-y-1">
        <Figure name={`Dose at ${depthMm} mm`}>
          {formatDoseFigure(plan.doseMin)} min at {formatTemp(rules.dose.refTempC, unit)}
        </Figure>
        <Figure name="Target">
          {formatDoseFigure(plan.targetDoseMin)}{' '}
          <span className="text-soft">
            ({formatDoseFigure(plan.targetLowMin)} to {formatDoseFigure(plan.targetHighMin)})
          </span>
        </Figure>
        <Figure name="Toast depth (model)">{depthWords(wood)}</Figure>
        <Figure name="Slow and fast index">
          {formatDoseFigure(slowMin)}, {formatDoseFigure(fastMin)}
        </Figure>
        <Figure name="Fire">
          {formatNumber(plan.totalS / 60, (plan.totalS / 60) % 1 === 0 ? 0 : 1)} min
        </Figure>
      </dl>
      {isConductivityOutsideFormula(moisturePercent) ? (
        <p className="mt-1 text-soft">
          Staves of {CONDUCTIVITY_MOISTURE_LIMIT_PERCENT} % moisture and more are outside the formula of the
          wood’s conductivity: the depths are less sure.
        </p>
      ) : null}
      {isOff ? (
        <p role="status" className="mt-1 font-[560] text-amber">
          The plan’s dose is outside its own target: a barrel fired exactly so would be out of tolerance. Move
          the plan, or take the plan’s dose as the target.
        </p>
      ) : null}
    </div>
  )
}

function Figure({ name, children }: { name: string; children: React.ReactNode }) {
  return (
    <div>
      <dt className="text-small text-soft">{name}</dt>
      <dd className="text-large leading-tight font-[560]">{children}</dd>
    </div>
  )
}
