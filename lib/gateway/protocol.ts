import * as z from 'zod'

/**
 * What a gateway says to the server, and what it is answered. The single source of these types for the
 * gateway program, the hearth simulator and the server's ingest.
 *
 * The same message goes over the socket (`readings:send` in the namespace `/gateway`, the acknowledgement
 * carries the answer or a problem object) and over HTTP (`POST /api/ingest/readings`, Bearer device token).
 */

export const GATEWAY_NAMESPACE = '/gateway'
export const SEND_READINGS_EVENT = 'readings:send'
export const INGEST_PATH = '/api/ingest/readings'

/** Most readings in one message. */
export const MAX_READINGS_PER_MESSAGE = 5_000
/** Most declared losses in one message. */
export const MAX_LOSSES_PER_MESSAGE = 1_000
/** A gateway says how it stands no more often than this. */
export const STATUS_EVERY_MS = 10_000

/** Sequence numbers count from 1 for each (gateway, boot), over all its probes; 0 acknowledges nothing. */
const seqSchema = z.int().min(0)

const instantSchema = z.iso.datetime({ offset: true })

/** Open circuit, short circuit, or another fault that the gateway's own electronics found. */
export const readingFlagSchema = z.enum(['open', 'short', 'fault'])

/** Voltage at the gateway's terminals in µV (kept to 0.1), and the terminals' temperature in °C (kept to 0.01). */
export const emfSchema = z.strictObject({
  microvolts: z.number().min(-200_000).max(200_000),
  coldJunctionC: z.number().min(-60).max(125),
})

/**
 * One reading of one probe: a voltage with its cold junction, or a temperature in °C from electronics that
 * convert by themselves. A flagged reading may carry neither: it says that the probe could not be read.
 */
export const readingSchema = z
  .strictObject({
    seq: seqSchema,
    probeId: z.guid(),
    at: instantSchema,
    emf: emfSchema.optional(),
    tempC: z.number().min(-300).max(3_000).optional(),
    flag: readingFlagSchema.optional(),
  })
  .refine((reading) => reading.emf === undefined || reading.tempC === undefined, {
    error: 'Give a voltage (emf) or a temperature (tempC), not both',
    path: ['tempC'],
  })
  .refine(
    (reading) => reading.emf !== undefined || reading.tempC !== undefined || reading.flag !== undefined,
    {
      error: 'Give a voltage (emf), a temperature (tempC) or a flag',
      path: ['emf'],
    },
  )

/** Numbers that this boot has used and will never send: both ends included. */
export const lossSchema = z
  .strictObject({ from: seqSchema, to: seqSchema, reason: z.string().trim().min(1).max(200) })
  .refine((loss) => loss.to >= loss.from, { error: 'The end is before the start', path: ['to'] })

/**
 * How the gateway program stands, for its page. `spooledReadings` are those that no server has acknowledged;
 * `spooledBytes` is what the spool takes of the disk, which falls only by whole files; `oldestUnsentAt` is the instant
 * of the oldest unacknowledged reading, by the gateway's own clock, and null when none waits.
 */
export const gatewayStatusSchema = z.strictObject({
  spooledReadings: z.int().min(0),
  spooledBytes: z.int().min(0),
  oldestUnsentAt: instantSchema.nullable(),
  programVersion: z.string().trim().min(1).max(60),
  uptimeS: z.int().min(0),
})

/**
 * One message from a gateway. `sentAt` is the gateway's clock at sending: the server takes its offset from it.
 * A message without readings and losses is allowed; it asks how far this boot is acknowledged.
 */
export const ingestMessageSchema = z.strictObject({
  bootId: z.guid(),
  sentAt: instantSchema,
  readings: z.array(readingSchema).max(MAX_READINGS_PER_MESSAGE),
  lost: z.array(lossSchema).max(MAX_LOSSES_PER_MESSAGE).optional(),
  /** Sent at most every `STATUS_EVERY_MS`. */
  status: gatewayStatusSchema.optional(),
})

/**
 * The same message with its readings unchecked but for their numbers, so that the server can name each bad
 * reading by its `seq` and keep the good ones: parse this first, then each reading by `readingSchema`.
 */
export const ingestEnvelopeSchema = z.strictObject({
  bootId: z.guid(),
  sentAt: instantSchema,
  readings: z.array(z.looseObject({ seq: seqSchema })).max(MAX_READINGS_PER_MESSAGE),
  lost: z.array(lossSchema).max(MAX_LOSSES_PER_MESSAGE).optional(),
  /** Sent at most every `STATUS_EVERY_MS`. */
  status: gatewayStatusSchema.optional(),
})

/** A reading that the server will not keep as a measurement; it counts as acknowledged. */
export const refusalSchema = z.object({ seq: seqSchema, reason: z.string() })

/**
 * Sent after commit. `ackedSeq`: the highest number up to and including which everything of this boot is
 * committed, refused with its reason, or declared lost; 0 when that is nothing.
 */
export const ingestAnswerSchema = z.object({ ackedSeq: seqSchema, refused: z.array(refusalSchema) })

/** The part of an RFC 9457 problem object that a gateway acts on. */
export const ingestProblemSchema = z.looseObject({
  type: z.string().optional(),
  title: z.string(),
  status: z.int(),
  detail: z.string().optional(),
})

/** What a socket acknowledgement carries. */
export const ingestOutcomeSchema = z.union([ingestAnswerSchema, ingestProblemSchema])

export type ReadingFlag = z.infer<typeof readingFlagSchema>
export type Emf = z.infer<typeof emfSchema>
export type Reading = z.infer<typeof readingSchema>
export type Loss = z.infer<typeof lossSchema>
export type GatewayStatus = z.infer<typeof gatewayStatusSchema>
export type IngestMessage = z.infer<typeof ingestMessageSchema>
export type IngestEnvelope = z.infer<typeof ingestEnvelopeSchema>
export type Refusal = z.infer<typeof refusalSchema>
export type IngestAnswer = z.infer<typeof ingestAnswerSchema>
export type IngestProblem = z.infer<typeof ingestProblemSchema>
export type IngestOutcome = z.infer<typeof ingestOutcomeSchema>
