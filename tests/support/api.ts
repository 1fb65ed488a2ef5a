import { readdirSync } from 'node:fs'
import { join, sep } from 'node:path'
import { fileURLToPath } from 'node:url'
import { testOrigin } from '@/tests/support/environment'

/** Calls route handlers directly with Request objects: the same code as behind the server, without its sockets. */

export type RouteCall = {
  cookie?: string | undefined
  /** Sent as JSON with its content type; a string or bytes are sent as they are, with JSON's content type too. */
  body?: unknown
  headers?: Readonly<Record<string, string>>
}

export type RouteAnswer = {
  status: number
  headers: Headers
  text: string
  /** The JSON of the answer; undefined when it is empty or no JSON. */
  json: unknown
  /** The cookie that the answer sets, ready to send back, or null. */
  cookie: string | null
}

type RouteFile = { file: string; segments: readonly string[] }
type Handler = (
  request: Request,
  context: { params: Promise<Record<string, string | string[]>> },
) => Promise<Response>

const root = fileURLToPath(new URL('../..', import.meta.url))
let routeFiles: readonly RouteFile[] | null = null

/** Every app/api route file with its address in segments; `[id]` stands for one, `[...rest]` for all that follow. */
export function listRouteFiles(): readonly RouteFile[] {
  routeFiles ??= readdirSync(join(root, 'app'), { recursive: true, encoding: 'utf8' })
    .filter((name) => /(^|[\\/])route\.ts$/.test(name))
    .map((name) => ({
      file: join(root, 'app', name),
      segments: name
        .split(sep)
        .slice(0, -1)
        .filter((segment) => !segment.startsWith('(')),
    }))
  return routeFiles
}

/** @throws Error when no file under app serves the path: the test has a wrong address or the route is missing. */
export async function callRoute(method: string, path: string, call: RouteCall = {}): Promise<RouteAnswer> {
  const url = new URL(path, testOrigin)
  const found = findRoute(url.pathname)
  if (found === null) throw new Error(`No route file serves ${url.pathname}`)
  const module: unknown = await import(found.file)
  const handler: unknown =
    typeof module === 'object' && module !== null ? Reflect.get(module, method) : undefined
  if (typeof handler !== 'function') throw new Error(`${found.file} does not export ${method}`)
  const response = await asHandler(handler)(makeRequest(method, url, call), {
    params: Promise.resolve(found.params),
  })
  return readAnswer(response)
}

/** The parsed boundary: Next calls what a route file exports in just this way. */
function asHandler(value: unknown): Handler {
  return value as Handler
}

function makeRequest(method: string, url: URL, call: RouteCall): Request {
  const headers = new Headers({ origin: testOrigin, 'sec-fetch-site': 'same-origin' })
  if (call.cookie !== undefined) headers.set('cookie', call.cookie)
  const hasBody = call.body !== undefined
  if (hasBody) headers.set('content-type', 'application/json')
  for (const [name, value] of Object.entries(call.headers ?? {})) headers.set(name, value)
  const isRaw = typeof call.body === 'string' || call.body instanceof Uint8Array
  return new Request(url, {
    method,
    headers,
    ...(hasBody ? { body: isRaw ? rawBody(call.body) : JSON.stringify(call.body) } : {}),
  })
}

function rawBody(body: unknown): BodyInit {
  return typeof body === 'string' ? body : Buffer.from(body instanceof Uint8Array ? body : [])
}

async function readAnswer(response: Response): Promise<RouteAnswer> {
  const text = await response.text()
  const type = response.headers.get('content-type') ?? ''
  const setCookie = response.headers.get('set-cookie')
  return {
    status: response.status,
    headers: response.headers,
    text,
    json: /json\b/.test(type) && text !== '' ? JSON.parse(text) : undefined,
    cookie: setCookie === null ? null : (setCookie.split(';')[0] ?? null),
  }
}

/** The most particular file that serves the path: a named segment goes before `[id]`, that before `[...rest]`. */
function findRoute(pathname: string): { file: string; params: Record<string, string | string[]> } | null {
  const parts = pathname
    .split('/')
    .filter((part) => part !== '')
    .map(decodeURIComponent)
  const fits = listRouteFiles().flatMap(({ file, segments }) => {
    const params = matchSegments(segments, parts)
    return params === null ? [] : [{ file, params, rank: rankSegments(segments) }]
  })
  return fits.sort((a, b) => a.rank.localeCompare(b.rank))[0] ?? null
}

function rankSegments(segments: readonly string[]): string {
  return segments.map((part) => (part.startsWith('[...') ? '2' : part.startsWith('[') ? '1' : '0')).join('')
}

function matchSegments(
  segments: readonly string[],
  parts: readonly string[],
): Record<string, string | string[]> | null {
  const params: Record<string, string | string[]> = {}
  for (const [index, segment] of segments.entries()) {
    const part = parts[index]
    if (part === undefined) return null
    if (segment.startsWith('[...')) return { ...params, [segment.slice(4, -1)]: parts.slice(index) }
    if (segment.startsWith('[')) params[segment.slice(1, -1)] = part
    else if (segment !== part) return null
  }
  return segments.length === parts.length ? params : null
}
