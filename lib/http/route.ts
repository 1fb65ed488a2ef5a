import type * as z from 'zod'
import type { DeviceActor, PersonActor } from '@/lib/auth/actor'
import { checkOrigin } from '@/lib/auth/check-origin'
import { notByPin } from '@/lib/auth/permissions'
import { readDeviceActor } from '@/lib/auth/read-device-actor'
import { readSessionActor } from '@/lib/auth/read-session-actor'
import type { FieldErrors } from '@/lib/errors'
import { AppError } from '@/lib/errors'
import type { AnyOperation, Operation } from '@/lib/http/operation'
import { problemResponse } from '@/lib/http/problem'
import { readJsonBody } from '@/lib/http/read-json-body'

type RouteContext = { params: Promise<Record<string, string | string[] | undefined>> }

export type Call<Params, Query, Body> = {
  params: Params
  query: Query
  body: Body
  request: Request
}

type Answer = Response | object | null | undefined | void

/** zod's issues as one sentence a field; the path's dots are kept so that forms can find the input. */
export function fieldErrorsOf(error: z.ZodError): FieldErrors {
  const fields: FieldErrors = {}
  for (const issue of error.issues) {
    const path = issue.path.map(String).join('.')
    const names =
      issue.code === 'unrecognized_keys' ? issue.keys.map((key) => (path ? `${path}.${key}` : key)) : [path]
    for (const name of names) {
      fields[name] ??=
        issue.code === 'unrecognized_keys' ? 'This field is not known here. Leave it out.' : issue.message
    }
  }
  return fields
}

/** Parses by a strict schema. @throws AppError 'invalid' with a sentence a field. */
export function parseInput<T>(schema: z.ZodType<T>, value: unknown, whole = 'Some fields need mending.'): T {
  const parsed = schema.safeParse(value)
  if (parsed.success) return parsed.data
  const fields = fieldErrorsOf(parsed.error)
  const first = Object.entries(fields)[0]
  const detail =
    first === undefined ? whole : first[0] === '' ? first[1] : `${whole} ${first[0]}: ${first[1]}`
  throw new AppError('invalid', detail, { fields })
}

/** Params that do not fit their schema name nothing that exists, so they are 'not found'. */
function parseParams<T>(schema: z.ZodType<T>, value: unknown): T {
  const parsed = schema.safeParse(value)
  if (parsed.success) return parsed.data
  throw new AppError('not found', 'Nothing here has this address.')
}

function toResponse(answer: Answer, status: number | undefined): Response {
  if (answer instanceof Response) return answer
  if (answer === null || answer === undefined) return new Response(null, { status: status ?? 204 })
  return new Response(JSON.stringify(answer), {
    status: status ?? 200,
    headers: { 'content-type': 'application/json', 'cache-control': 'no-store' },
  })
}

async function readCall<Params, Query, Body>(
  operation: Operation<Params, Query, Body>,
  request: Request,
  context: RouteContext | undefined,
): Promise<Call<Params, Query, Body>> {
  const none: unknown = undefined
  const search = Object.fromEntries(new URL(request.url).searchParams)
  const rawParams = context === undefined ? {} : await context.params
  return {
    request,
    params: operation.params === undefined ? trust<Params>(none) : parseParams(operation.params, rawParams),
    query: operation.query === undefined ? trust<Query>(none) : parseInput(operation.query, search),
    body:
      operation.body === undefined
        ? trust<Body>(none)
        : parseInput(operation.body, await readJsonBody(request, operation.bodyLimit)),
  }
}

/** The parsed boundary: an operation without a schema has `undefined` as that part's type. */
function trust<T>(value: unknown): T {
  return value as T
}

/** A route that needs a session: checks origin, session and input, hands them to the verb, answers problems by RFC 9457. */
export function route<Params, Query, Body>(
  operation: Operation<Params, Query, Body>,
  handle: (actor: PersonActor, call: Call<Params, Query, Body>) => Promise<Answer>,
) {
  return async (request: Request, context?: RouteContext): Promise<Response> => {
    try {
      checkOrigin(request)
      const actor = await readSessionActor(request.headers.get('cookie'))
      if (actor === null) throw sessionEnded()
      requireAccess(operation, actor)
      return toResponse(await handle(actor, await readCall(operation, request, context)), operation.status)
    } catch (error) {
      return problemResponse(error)
    }
  }
}

/**
 * A route of the room: a person's session as above, and without one an enrolled device, where the operation says that
 * it may be alone.
 */
export function roomRoute<Params, Query, Body>(
  operation: Operation<Params, Query, Body>,
  handle: (actor: PersonActor | DeviceActor, call: Call<Params, Query, Body>) => Promise<Answer>,
) {
  return async (request: Request, context?: RouteContext): Promise<Response> => {
    try {
      checkOrigin(request)
      const cookie = request.headers.get('cookie')
      const person = await readSessionActor(cookie)
      if (person !== null) requireAccess(operation, person)
      const actor = person ?? (operation.atDevice === 'alone' ? await readDeviceActor(cookie) : null)
      if (actor === null) throw sessionEnded()
      return toResponse(await handle(actor, await readCall(operation, request, context)), operation.status)
    } catch (error) {
      return problemResponse(error)
    }
  }
}

/** A route for an enrolled device itself, whoever is signed in at it. */
export function deviceRoute<Params, Query, Body>(
  operation: Operation<Params, Query, Body>,
  handle: (device: DeviceActor, call: Call<Params, Query, Body>) => Promise<Answer>,
) {
  return async (request: Request, context?: RouteContext): Promise<Response> => {
    try {
      checkOrigin(request)
      const device = await readDeviceActor(request.headers.get('cookie'))
      if (device === null) {
        throw new AppError(
          'not signed in',
          'This device is not enrolled here. An administrator makes a code.',
        )
      }
      return toResponse(await handle(device, await readCall(operation, request, context)), operation.status)
    } catch (error) {
      return problemResponse(error)
    }
  }
}

function sessionEnded(): AppError {
  return new AppError('not signed in', 'Your session has ended. Sign in and try again.')
}

/** Turns away whoever can never succeed before anything of the request is read; the verb authorises as well. */
function requireAccess(operation: Pick<AnyOperation, 'access' | 'atDevice'>, actor: PersonActor): void {
  const { access, atDevice } = operation
  if (typeof access !== 'string' && access.includes(actor.role)) {
    if (actor.byPinAt !== undefined && atDevice === undefined) throw notByPin()
    return
  }
  throw new AppError(
    'not allowed',
    'This is not for your role. Ask your administrator if it should be yours.',
  )
}

/** A route that needs no session (sign-in, health, links, gateways); the verb authorises what it must. */
export function openRoute<Params, Query, Body>(
  operation: Operation<Params, Query, Body>,
  handle: (call: Call<Params, Query, Body>) => Promise<Answer>,
) {
  return async (request: Request, context?: RouteContext): Promise<Response> => {
    try {
      checkOrigin(request)
      return toResponse(await handle(await readCall(operation, request, context)), operation.status)
    } catch (error) {
      return problemResponse(error)
    }
  }
}
