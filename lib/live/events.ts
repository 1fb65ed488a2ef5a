import * as z from 'zod'
import { alarmKinds, alarmLevels } from '@/lib/alarms/alarm-kinds'
import { alarmStates } from '@/lib/alarms/alarm-states'

/** Every socket event, `noun:verb`, with its payload. Namespaces: /live for people, /gateway for gateways. */

export const firingStates = [
  'queued',
  'preheating',
  'bending',
  'toasting',
  'resting',
  'finished',
  'abandoned',
] as const
export const liveStates = ['preheating', 'bending', 'toasting', 'resting'] as const
export const probeRoles = ['lead', 'opposite', 'coals'] as const

/** One point of a live curve: index in the firing's stream, role, instant in ms UTC, °C or null (no reading). */
export const livePointSchema = z.tuple([
  z.number().int().nonnegative(),
  z.enum(probeRoles),
  z.number().int(),
  z.number().nullable(),
])
export type LivePoint = z.infer<typeof livePointSchema>

/** Client → server: join a firing, with what it already has. `epoch` changes when the server's stream starts anew. */
export const joinFiringSchema = z.strictObject({
  firingId: z.uuid(),
  epoch: z.string().max(64).nullable().default(null),
  /** Index of the last point that the client holds; -1 for none. */
  lastIndex: z.number().int().min(-1).default(-1),
})

const signalSchema = z.object({
  role: z.enum(probeRoles),
  probeName: z.string(),
  /** 'live', 'stale' (older than 3 s, age shown), or 'no reading' with its cause in words. */
  condition: z.enum(['live', 'stale', 'no reading']),
  cause: z.string().nullable(),
  lastAtMs: z.number().nullable(),
  tempC: z.number().nullable(),
})

/** An alarm that is on, has to be seen yet, or is shelved. Its words are in °C (`shownAlarmWords`). */
const presentAlarmSchema = z.object({
  /** Of this coming of the alarm; `acknowledge`, `shelve` and `unshelve` name it. */
  id: z.string(),
  kind: z.enum(alarmKinds),
  words: z.string(),
  level: z.enum(alarmLevels),
  sinceMs: z.number(),
  state: z.enum(alarmStates),
  mayAcknowledge: z.boolean(),
  shelvedUntilMs: z.number().nullable(),
})

/** A sign of trouble that is no alarm, in words with what to do. */
const troubleSchema = z.object({
  kind: z.enum(['gateway lost', 'pair disagrees', 'clock differs']),
  words: z.string(),
})

const nextActionSchema = z.object({
  words: z.string(),
  /** Seconds until it is due; null when there is nothing to do; negative when late. */
  dueInS: z.number().nullable(),
})

/** Server → client: what the hub computed for one firing at one tick. */
export const firingStateSchema = z.object({
  firingId: z.uuid(),
  epoch: z.string(),
  atMs: z.number().int(),
  state: z.enum(firingStates),
  revision: z.number().int(),
  signals: z.array(signalSchema),
  woodTempC: z.number().nullable(),
  planTempC: z.number().nullable(),
  climbCPerMin: z.number().nullable(),
  /** Seconds since toast start on the plan's time axis; null before the toast. */
  toastS: z.number().nullable(),
  stage: z
    .object({ position: z.number().int(), name: z.string(), elapsedS: z.number(), leftS: z.number() })
    .nullable(),
  next: nextActionSchema,
  dose: z.object({
    minutes: z.number(),
    targetMinutes: z.number(),
    planMinutesNow: z.number(),
    /** Half width of the same-mount interval as a share of the dose, k = 2. */
    goodToPercent: z.number(),
    isIncomplete: z.boolean(),
  }),
  forecast: z
    .object({
      sentence: z.string(),
      advice: z.string(),
      /** What the advice asks of hands; `minutes` whole, 0 where it names none. Null: nothing to take or leave. */
      ask: z
        .object({ kind: z.enum(['rest now', 'rest early', 'hold longer']), minutes: z.number() })
        .nullable(),
      minutesToTargetLow: z.number().nullable(),
      minutesToTargetHigh: z.number().nullable(),
    })
    .nullable(),
  /** The stave model's newest column: log10 dose by depth, and its depths; marked as a model where shown. */
  stave: z
    .object({
      atS: z.number(),
      depthsMm: z.array(z.number()),
      log10Dose: z.array(z.number()),
      isotherm100Mm: z.number().nullable(),
      isotherm150Mm: z.number().nullable(),
      toastDepthMm: z.number().nullable(),
    })
    .nullable(),
  troubles: z.array(troubleSchema),
  /** The gravest first, unseen before seen; behind them what is over and not seen yet, then the shelved. */
  alarms: z.array(presentAlarmSchema),
  /** The gravest of those that are on, for the room; a reminder is none. */
  alarm: z.object({ words: z.string(), level: z.enum(['amber', 'red']), sinceMs: z.number() }).nullable(),
})
export type FiringState = z.infer<typeof firingStateSchema>

export const firingReadingsSchema = z.object({
  firingId: z.uuid(),
  epoch: z.string(),
  points: z.array(livePointSchema),
})
export type FiringReadings = z.infer<typeof firingReadingsSchema>

/** The join acknowledgement: points the client lacks, the newest state, and the wood picture so far. */
export const firingJoinedSchema = z.object({
  firingId: z.uuid(),
  epoch: z.string(),
  /** True when the client must drop what it held: its epoch is gone. */
  isFresh: z.boolean(),
  points: z.array(livePointSchema),
  state: firingStateSchema,
  staveColumns: z.array(firingStateSchema.shape.stave.unwrap()),
})
export type FiringJoined = z.infer<typeof firingJoinedSchema>

/** One firing of the room overview. */
export const roomFiringSchema = firingStateSchema
  .omit({ forecast: true, stave: true, alarms: true, troubles: true })
  .extend({
    hearthNumber: z.number().int().nullable(),
    serial: z.string(),
    recipeName: z.string(),
    /** The wood is twice its band away from the plan. */
    isFarFromPlan: z.boolean(),
  })
export type RoomFiring = z.infer<typeof roomFiringSchema>

export const roomStateSchema = z.object({ atMs: z.number().int(), firings: z.array(roomFiringSchema) })
export type RoomState = z.infer<typeof roomStateSchema>

export const events = {
  /** client → server, acknowledged with firingJoinedSchema or a problem */
  firingJoin: 'firing:join',
  firingLeave: 'firing:leave',
  /** client → server, acknowledged with roomStateSchema; joins the room overview */
  roomJoin: 'room:join',
  /** server → client */
  firingReadings: 'firing:readings',
  firingState: 'firing:state',
  /** server → client: marks, phase, finish: the client fetches what it needs again */
  /** once a second: every live firing in its short form */
  roomState: 'room:state',
  firingChanged: 'firing:changed',
  roomChanged: 'room:changed',
  sessionEnded: 'session:ended',
  /** gateway → server, acknowledged with { ackedSeq, refused } or a problem */
  readingsSend: 'readings:send',
} as const

export const firingChangedSchema = z.object({
  firingId: z.uuid(),
  revision: z.number().int(),
  what: z.string(),
})
export type FiringChanged = z.infer<typeof firingChangedSchema>

/** Client → server: leave a firing. */
export const leaveFiringSchema = z.strictObject({ firingId: z.uuid() })
