import type { Loss } from '@/lib/gateway/protocol'
import { ingestEnvelopeSchema, MAX_READINGS_PER_MESSAGE } from '@/lib/gateway/protocol'
import { parseInput } from '@/lib/http/route'
import type { GatewayStatus } from '@/lib/ingest/note-gateway-status'

/** A reading as it came: only its number is sure. */
export type RawReading = { readonly seq: number } & Readonly<Record<string, unknown>>

export type Envelope = {
  bootId: string
  sentAtMs: number
  readings: readonly RawReading[]
  lost: readonly Loss[]
  status: GatewayStatus | undefined
}

const headerSchema = ingestEnvelopeSchema.omit({ readings: true })

/**
 * A message whose frame is right; its readings are looked at one by one later. Parses as `ingestEnvelopeSchema`
 * does, without walking the readings twice.
 *
 * @throws AppError 'invalid' (422) naming what is wrong with the message as a whole
 */
export function readEnvelope(message: unknown): Envelope {
  if (typeof message === 'object' && message !== null && 'readings' in message) {
    const { readings, ...header } = message
    const parsed = headerSchema.safeParse(header)
    if (parsed.success && areNumbered(readings)) {
      return envelopeOf(parsed.data, readings)
    }
  }
  const parsed = parseInput(ingestEnvelopeSchema, message, 'The message cannot be taken.')
  return envelopeOf(parsed, parsed.readings)
}

function envelopeOf(
  header: { bootId: string; sentAt: string; lost?: Loss[] | undefined; status?: GatewayStatus | undefined },
  readings: readonly RawReading[],
): Envelope {
  return {
    bootId: header.bootId.toLowerCase(),
    sentAtMs: Date.parse(header.sentAt),
    readings,
    lost: header.lost ?? [],
    status: header.status,
  }
}

function areNumbered(readings: unknown): readings is readonly RawReading[] {
  if (!Array.isArray(readings) || readings.length > MAX_READINGS_PER_MESSAGE) return false
  for (const reading of readings) {
    if (typeof reading !== 'object' || reading === null || Array.isArray(reading)) return false
    const seq: unknown = reading.seq
    if (typeof seq !== 'number' || !Number.isSafeInteger(seq) || seq < 0) return false
  }
  return true
}
