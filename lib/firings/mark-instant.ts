import { invalidField } from '@/lib/errors'
import { now } from '@/lib/runtime'

/** A tablet's clock may run this far ahead of ours. */
const aheadAtMostS = 5

/**
 * When something was done: as given, or now. What lies a few seconds ahead is taken as now.
 * @throws AppError 'invalid' when it lies in the future or before `notBefore`
 */
export function markInstant(
  given: string | undefined,
  bounds: { notBefore: Date | null | undefined; field?: string },
): Date {
  const at = given === undefined ? now() : new Date(given)
  const field = bounds.field ?? 'at'
  if (at.getTime() > now().getTime() + aheadAtMostS * 1000) {
    throw invalidField(field, 'This lies in the future. Look at the clock of this device.')
  }
  if (bounds.notBefore !== null && bounds.notBefore !== undefined && at < bounds.notBefore) {
    throw invalidField(
      field,
      `This lies before ${bounds.notBefore.toISOString()}, which is too early for it.`,
    )
  }
  return at.getTime() > now().getTime() ? now() : at
}
