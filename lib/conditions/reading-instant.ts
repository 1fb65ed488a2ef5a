import { markInstant } from '@/lib/firings/mark-instant'

/** When a reading was taken: as given, or now; of any day that was. @throws AppError 'invalid' for one in the future */
export function readingInstant(given: string | undefined): Date {
  return markInstant(given, { notBefore: new Date('2000-01-01T00:00:00Z') })
}
