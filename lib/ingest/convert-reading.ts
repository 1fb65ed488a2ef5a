import type { ProbeCorrection } from '@/lib/science/probe-correction'
import type { ThermocoupleType } from '@/lib/science/thermocouple'
import { compensatedTempC } from '@/lib/science/thermocouple'

/** How a probe's stored readings become °C. */
export type Conversion = { type: ThermocoupleType; correction: ProbeCorrection }

/**
 * °C of one stored reading: emf and cold junction added as emf and inverted (SCIENCE §1), corrected by the probe's
 * checks. NaN when it is flagged, has no value, or lies out of the thermocouple's range: no reading, never a number.
 * The live hub, the score and the firing page all convert here, so that they agree bit for bit.
 */
export function convertReading(
  conversion: Conversion,
  emfTenthUv: number | null,
  coldCentiC: number | null,
  tempCentiC: number | null,
  flag: number,
): number {
  if (flag !== 0) return NaN
  const tempC = measuredTempC(conversion.type, emfTenthUv, coldCentiC, tempCentiC)
  return tempC + conversion.correction.correctionC(tempC)
}

function measuredTempC(
  type: ThermocoupleType,
  emfTenthUv: number | null,
  coldCentiC: number | null,
  tempCentiC: number | null,
): number {
  if (tempCentiC !== null) return tempCentiC / 100
  if (emfTenthUv === null || coldCentiC === null) return NaN
  try {
    return compensatedTempC(type, emfTenthUv / 10_000, coldCentiC / 100)
  } catch (error) {
    if (error instanceof RangeError) return NaN
    throw error
  }
}
