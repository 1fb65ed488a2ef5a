import type { EntityManager } from '@mikro-orm/postgresql'
import type * as z from 'zod'
import type { PersonActor } from '@/lib/auth/actor'
import { signAs } from '@/lib/auth/sign'
import { refuseOutOfDate } from '@/lib/firings/check-start'
import type { overrideSchema } from '@/lib/firings/schema'

/**
 * Signs that a firing goes on although a check is out of date; nothing when none is.
 * @throws AppError 'conflict' when something is out of date and nobody signs
 */
export async function signOverride(
  em: EntityManager,
  person: PersonActor,
  override: z.infer<typeof overrideSchema> | undefined,
  faults: readonly string[],
  subject: { id: string; sha256: string },
): Promise<void> {
  if (faults.length === 0) return
  if (override === undefined) refuseOutOfDate(faults)
  await signAs(em, person, {
    password: override.password,
    meaning: 'Starts this firing although a check is out of date',
    reason: `${faults.join(' ')} ${override.reason}`,
    subject: { type: 'firing', id: subject.id, sha256: subject.sha256 },
  })
}
