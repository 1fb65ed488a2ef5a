import { randomUUID } from 'node:crypto'
import { databaseUnavailable, isDatabaseUnavailable } from '@/lib/db/database-errors'
import type { AppErrorKind } from '@/lib/errors'
import { isAppError } from '@/lib/errors'
import { log } from '@/lib/log'

/** The one table from an error's kind to its status and title (RFC 9457). */
const statusOf: Record<AppErrorKind, { status: number; title: string }> = {
  malformed: { status: 400, title: 'The request could not be read' },
  'not signed in': { status: 401, title: 'Sign in first' },
  'not allowed': { status: 403, title: 'Not allowed' },
  'not found': { status: 404, title: 'Not found' },
  conflict: { status: 409, title: 'This does not fit what is there now' },
  stale: { status: 409, title: 'Somebody changed this meanwhile' },
  'too large': { status: 413, title: 'Too large' },
  'unsupported type': { status: 415, title: 'This content type is not taken' },
  invalid: { status: 422, title: 'Something needs mending' },
  'too many': { status: 429, title: 'Too many tries' },
  unavailable: { status: 503, title: 'Not available just now' },
}

export type Problem = {
  type: string
  title: string
  status: number
  detail: string
  fields?: Record<string, string>
  current?: unknown
  retryAfterS?: number
  id?: string
}

/** The problem object that routes answer and that socket acknowledgements carry. */
export function toProblem(error: unknown): Problem {
  if (isAppError(error)) {
    const { status, title } = statusOf[error.kind]
    return {
      type: `urn:emberstave:problem:${error.kind.replaceAll(' ', '-')}`,
      title,
      status,
      detail: error.detail,
      ...(Object.keys(error.fields).length > 0 ? { fields: error.fields } : {}),
      ...(error.current === undefined ? {} : { current: error.current }),
      ...(error.retryAfterS === undefined ? {} : { retryAfterS: error.retryAfterS }),
    }
  }
  if (isDatabaseUnavailable(error)) return toProblem(databaseUnavailable())
  const id = randomUUID()
  log().error({ id, err: error }, 'a request failed unexpectedly')
  return {
    type: 'urn:emberstave:problem:unexpected',
    title: 'Something went wrong here',
    status: 500,
    detail: `This is our fault, not yours. Try again; if it stays, tell your administrator the number ${id}.`,
    id,
  }
}

export function problemResponse(error: unknown): Response {
  const problem = toProblem(error)
  const headers: Record<string, string> = {
    'content-type': 'application/problem+json',
    'cache-control': 'no-store',
  }
  if (problem.retryAfterS !== undefined) headers['retry-after'] = String(problem.retryAfterS)
  return new Response(JSON.stringify(problem), { status: problem.status, headers })
}
