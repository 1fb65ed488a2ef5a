import type { FiringState } from '@/lib/live/events'
import type { Plan } from '@/lib/recipes/plan-of'

type Known = Pick<FiringState, 'woodTempC' | 'planTempC' | 'toastS'>

/** The plan's band about a moment, half its width in °C; null outside the plan. */
export function bandHalfAt(plan: Pick<Plan, 'stages'>, timeS: number): number | null {
  const stage = plan.stages.find((one) => timeS >= one.startS && timeS <= one.endS)
  return stage?.bandHalfWidthC ?? null
}

/** A reading twice the band away from the plan takes the colour; less is said in words alone. */
export function isFarFromPlan(state: Known, plan: Pick<Plan, 'stages'>): boolean {
  if (state.woodTempC === null || state.planTempC === null || state.toastS === null) return false
  const halfC = bandHalfAt(plan, state.toastS)
  return halfC !== null && Math.abs(state.woodTempC - state.planTempC) > 2 * halfC
}
