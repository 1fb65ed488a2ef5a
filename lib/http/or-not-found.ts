import { notFound } from 'next/navigation'
import * as z from 'zod'
import { isAppError } from '@/lib/errors'

const uuid = z.uuid()

/** For pages of one thing: an id that names nothing readable is the "not found" page, not an error. */
export async function orNotFound<T>(work: Promise<T>, id: string): Promise<T> {
  try {
    const found = await work
    if (!uuid.safeParse(id).success) notFound()
    return found
  } catch (error) {
    if (!uuid.safeParse(id).success || (isAppError(error) && error.kind === 'not found')) notFound()
    throw error
  }
}
