import { addMonths } from 'date-fns'
import { invalidField } from '@/lib/errors'
import { now } from '@/lib/runtime'

export type CheckDates = { checkedAt: Date; dueAt: Date }

/**
 * When a check was made and is due again: as given, else now and the site's months after.
 * @throws AppError 'invalid' naming the date: a check in the future, or due before it was made
 */
export function checkDates(
  input: { checkedAt?: string | undefined; dueAt?: string | undefined },
  months: number,
): CheckDates {
  const at = now()
  const checkedAt = input.checkedAt === undefined ? at : new Date(input.checkedAt)
  if (checkedAt > at) throw invalidField('checkedAt', 'A check cannot be in the future.')
  const dueAt = input.dueAt === undefined ? usualDueAt(checkedAt, months) : new Date(input.dueAt)
  if (dueAt <= checkedAt) throw invalidField('dueAt', 'The next check must be after this one.')
  return { checkedAt, dueAt }
}

/** The site's months after a check; half a month is fifteen days. */
export function usualDueAt(checkedAt: Date, months: number): Date {
  const whole = addMonths(checkedAt, Math.floor(months))
  return new Date(whole.getTime() + (months % 1) * 30 * 86_400_000)
}
