import { AppError } from '@/lib/errors'
import { ingestPool } from '@/lib/ingest/ingest-pool'

const withinMs = 2_000

/** Says that the database answers. @throws AppError 'unavailable' (503) when it does not within 2 s. */
export async function checkReady(): Promise<{ status: 'ok' }> {
  const sentence = 'The database is not answering. Readings wait in the gateways; nothing is lost.'
  const late = new Promise<never>((_, reject) => {
    setTimeout(() => reject(new AppError('unavailable', sentence, { retryAfterS: 5 })), withinMs).unref()
  })
  try {
    await Promise.race([ingestPool().query('select 1'), late])
  } catch {
    throw new AppError('unavailable', sentence, { retryAfterS: 5 })
  }
  return { status: 'ok' }
}
