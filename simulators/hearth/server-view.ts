import { randomUUID } from 'node:crypto'
import * as z from 'zod'
import { piecePageSchema } from '@/lib/batches/schema'
import { firingReadingsSchema, firingSchema, type MarkKind } from '@/lib/firings/schema'
import { hearthListSchema } from '@/lib/probes/schema'

/*
 * All that the simulator asks of the server, over HTTP like any client, signed in as the demo's toaster. A toaster
 * in the flesh would look at the console; the virtual one looks here.
 */

const viewedFiringSchema = firingSchema.pick({
  id: true,
  state: true,
  revision: true,
  recipeCopy: true,
  moisturePercent: true,
  preheatAt: true,
  bendAt: true,
  toastAt: true,
  restAt: true,
  marks: true,
})
const viewedHearthsSchema = hearthListSchema.pick({ items: true })
const problemSchema = z.looseObject({ status: z.int(), title: z.string(), detail: z.string().optional() })

export type ViewedFiring = z.infer<typeof viewedFiringSchema>
export type ViewedHearth = z.infer<typeof viewedHearthsSchema>['items'][number]
export type ViewedReadings = z.infer<typeof firingReadingsSchema>
export type NewMark = {
  kind: MarkKind
  at: Date
  phase?: 'bending' | 'toasting' | 'resting'
  stagePosition?: number
}

/** The server said no; `status` 0 when it did not answer. */
export class ServerRefusal extends Error {
  constructor(
    readonly status: number,
    detail: string,
  ) {
    super(detail)
    this.name = 'ServerRefusal'
  }
}

export type ServerView = {
  listHearths: () => Promise<ViewedHearth[]>
  getFiring: (firingId: string) => Promise<ViewedFiring>
  getReadings: (firingId: string, points: number) => Promise<ViewedReadings>
  /** Answers the mark's id, by which it is known again in the firing. */
  addMark: (firingId: string, mark: NewMark, markId?: string) => Promise<string>
  finishFiring: (firingId: string, at: Date) => Promise<void>
  abandonFiring: (firingId: string, reason: string) => Promise<void>
  listWaitingPieceIds: () => Promise<string[]>
  startFiring: (pieceId: string, hearthId: string, moisturePercent: number) => Promise<string>
}

type Options = { serverUrl: string; email: string; password: string; request?: typeof fetch }

const TIMEOUT_MS = 15_000

/** Signs in when first needed, and again when the session has ended. Every call throws `ServerRefusal`. */
export function createServerView({ serverUrl, email, password, request = fetch }: Options): ServerView {
  let cookie: string | null = null

  const send = async (method: string, path: string, body?: unknown): Promise<Response> => {
    try {
      return await request(new URL(path, serverUrl), {
        method,
        headers: {
          accept: 'application/json',
          ...(cookie === null ? {} : { cookie }),
          ...(body === undefined ? {} : { 'content-type': 'application/json' }),
        },
        ...(body === undefined ? {} : { body: JSON.stringify(body) }),
        signal: AbortSignal.timeout(TIMEOUT_MS),
      })
    } catch (error) {
      throw new ServerRefusal(0, error instanceof Error ? error.message : String(error))
    }
  }
  const signIn = async () => {
    const response = await send('POST', '/api/session', { email, password })
    if (!response.ok) throw await refusalOf(response)
    await response.body?.cancel()
    cookie = response.headers
      .getSetCookie()
      .map((line) => line.split(';', 1)[0])
      .join('; ')
  }
  const call = async (method: string, path: string, body?: unknown): Promise<unknown> => {
    if (cookie === null) await signIn()
    let response = await send(method, path, body)
    if (response.status === 401) {
      await response.body?.cancel()
      await signIn()
      response = await send(method, path, body)
    }
    if (!response.ok) throw await refusalOf(response)
    const text = await response.text()
    return text === '' ? null : JSON.parse(text)
  }

  return {
    listHearths: async () => viewedHearthsSchema.parse(await call('GET', '/api/hearths')).items,
    getFiring: async (id) => viewedFiringSchema.parse(await call('GET', `/api/firings/${id}`)),
    getReadings: async (id, points) =>
      firingReadingsSchema.parse(await call('GET', `/api/firings/${id}/readings?points=${points}`)),
    addMark: async (firingId, { at, ...mark }, markId = randomUUID()) => {
      await call('POST', `/api/firings/${firingId}/marks`, { id: markId, at: at.toISOString(), ...mark })
      return markId
    },
    finishFiring: async (id, at) => {
      await call('POST', `/api/firings/${id}/finish`, { at: at.toISOString() })
    },
    abandonFiring: async (id, reason) => {
      await call('POST', `/api/firings/${id}/abandon`, { reason })
    },
    listWaitingPieceIds: async () => {
      const page = piecePageSchema.parse(await call('GET', '/api/barrels?show=waiting&limit=20'))
      return page.items.map((piece) => piece.id)
    },
    startFiring: async (pieceId, hearthId, moisturePercent) => {
      const started = await call('POST', '/api/firings', {
        pieceId,
        hearthId,
        moisturePercent,
        moistureMethod: 'meter',
        isStartListDone: true,
      })
      return z.looseObject({ id: z.string() }).parse(started).id
    },
  }
}

async function refusalOf(response: Response): Promise<ServerRefusal> {
  const text = await response.text()
  const problem = problemSchema.safeParse(safeJson(text))
  const detail = problem.success ? (problem.data.detail ?? problem.data.title) : response.statusText
  return new ServerRefusal(response.status, detail)
}

function safeJson(text: string): unknown {
  try {
    return JSON.parse(text)
  } catch {
    return null
  }
}
