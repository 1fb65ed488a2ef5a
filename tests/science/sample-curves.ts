import type { CurvePoint } from '../../lib/science/heat-dose'

/** Some minutes at one temperature. */
export function hold(minutes: number, tempC: number): CurvePoint[] {
  return [
    { timeS: 0, tempC },
    { timeS: minutes * 60, tempC },
  ]
}
