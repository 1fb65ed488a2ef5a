import type { Method } from '@/lib/http/operation'

/**
 * The one way in which the browser talks to /api. Answers are typed by the caller's DTO: server and client are
 * one build. Whatever does not succeed is thrown as an ApiProblem, whose `fields` stand beside the inputs.
 */

export type ApiProblemBody = {
  title: string
  /** 0 when the server did not answer at all. */
  status: number
  detail: string
  fields: Readonly<Record<string, string>>
  /** With 409: what the server holds now. */
  current: unknown
  retryAfterS: number | null
}

const brand = Symbol.for('emberstave.ApiProblem')

export class ApiProblem extends Error {
  readonly [brand] = true
  constructor(readonly problem: ApiProblemBody) {
    super(problem.detail)
    this.name = 'ApiProblem'
  }
}

export function isApiProblem(error: unknown): error is ApiProblem {
  return typeof error === 'object' && error !== null && Reflect.get(error, brand) === true
}

/** What a form or dialog shows for anything caught: a title, a sentence, and a sentence a field. */
export function problemOf(error: unknown): {
  title: string
  detail: string
  fields?: Readonly<Record<string, string>>
} {
  if (isApiProblem(error)) return error.problem
  return {
    title: 'This did not work',
    detail: 'Something went wrong in this page. What you typed is still here; try again.',
  }
}

export type QueryValues = Readonly<Record<string, string | number | boolean | null | undefined>>

/** Fills `{id}` of an operation's path and appends the query; empty values are left out. */
export function apiPath(
  path: string,
  params: Readonly<Record<string, string | number>> = {},
  query: QueryValues = {},
): string {
  const filled = path.replaceAll(/\{(\w+)\}/g, (whole, name: string) => {
    const value = params[name]
    return value === undefined ? whole : encodeURIComponent(String(value))
  })
  const search = new URLSearchParams()
  for (const [key, value] of Object.entries(query)) {
    if (value !== undefined && value !== null && value !== '') search.set(key, String(value))
  }
  const text = search.toString()
  return text === '' ? filled : `${filled}?${text}`
}

export type ApiCall = {
  /** Fills `{name}` in the path. */
  params?: Readonly<Record<string, string | number>>
  query?: QueryValues
  /** Sent as JSON. */
  body?: unknown
  signal?: AbortSignal
  /** Lets a last word be sent while the page goes away. */
  keepalive?: boolean
}

/**
 * Calls an operation: `await callApi<RecipeDto>('POST', '/api/recipes', { body })`. Null for an empty answer.
 * @throws ApiProblem for every answer that is no success, and when there is none.
 */
export async function callApi<Answer = null>(
  method: Method,
  path: string,
  call: ApiCall = {},
): Promise<Answer> {
  const response = await send(method, apiPath(path, call.params, call.query), call)
  const body = await readJson(response)
  if (!response.ok) throw new ApiProblem(readProblem(response, body))
  return trustAnswer<Answer>(body)
}

/** The same as a value: `{ data }` or `{ problem }`, for dialogs that answer a problem to show. */
export async function tryApi<Answer = null>(
  method: Method,
  path: string,
  call: ApiCall = {},
): Promise<{ data: Answer; problem: null } | { data: null; problem: ApiProblemBody }> {
  try {
    return { data: await callApi<Answer>(method, path, call), problem: null }
  } catch (error) {
    if (!isApiProblem(error)) throw error
    return { data: null, problem: error.problem }
  }
}

/** For swr: `useSWR(apiPath('/api/firings', {}, query), getApi<Page<FiringDto>>)`. */
export async function getApi<Answer>(path: string): Promise<Answer> {
  return callApi<Answer>('GET', path)
}

async function send(method: Method, url: string, call: ApiCall): Promise<Response> {
  try {
    return await fetch(url, {
      method,
      headers: {
        accept: 'application/json, application/problem+json',
        ...(call.body === undefined ? {} : { 'content-type': 'application/json' }),
      },
      ...(call.body === undefined ? {} : { body: JSON.stringify(call.body) }),
      ...(call.signal === undefined ? {} : { signal: call.signal }),
      ...(call.keepalive === undefined ? {} : { keepalive: call.keepalive }),
      credentials: 'same-origin',
      cache: 'no-store',
    })
  } catch (error) {
    if (error instanceof DOMException && error.name === 'AbortError') throw error
    throw new ApiProblem({
      title: 'The server did not answer',
      status: 0,
      detail: 'Nothing typed is lost. Look at the network connection and try again.',
      fields: {},
      current: undefined,
      retryAfterS: null,
    })
  }
}

async function readJson(response: Response): Promise<unknown> {
  const text = await response.text()
  if (text === '') return null
  try {
    return JSON.parse(text)
  } catch {
    return null
  }
}

function readProblem(response: Response, body: unknown): ApiProblemBody {
  const read = (key: string): unknown =>
    typeof body === 'object' && body !== null ? Reflect.get(body, key) : undefined
  const title = read('title')
  const detail = read('detail')
  const retryAfterS = read('retryAfterS')
  return {
    title: typeof title === 'string' ? title : 'This did not work',
    status: response.status,
    detail:
      typeof detail === 'string'
        ? detail
        : `The server answered ${response.status} without a reason. Nothing typed is lost; try again in a moment.`,
    fields: readFields(read('fields')),
    current: read('current'),
    retryAfterS: typeof retryAfterS === 'number' ? retryAfterS : null,
  }
}

function readFields(fields: unknown): Record<string, string> {
  if (typeof fields !== 'object' || fields === null) return {}
  const entries = Object.entries(fields).filter((entry): entry is [string, string] => {
    return typeof entry[1] === 'string'
  })
  return Object.fromEntries(entries)
}

/** The parsed boundary: the answer of our own server, of the same build, is what its operation says. */
function trustAnswer<Answer>(body: unknown): Answer {
  return body as Answer
}
