/** Everything a person can cause, by kind; `lib/http/problem.ts` is the one table from kind to status and title. */
export type AppErrorKind =
  | 'malformed'
  | 'not signed in'
  | 'not allowed'
  | 'not found'
  | 'conflict'
  | 'stale'
  | 'too large'
  | 'unsupported type'
  | 'invalid'
  | 'too many'
  | 'unavailable'

/** One sentence a person can act on, beside the field that it is about; the key is the field's path, dots between. */
export type FieldErrors = Record<string, string>

export type AppErrorMore = {
  fields?: FieldErrors
  /** For 'stale': what the server holds now, so that the client can show both sides. */
  current?: unknown
  /** For 'too many' and 'unavailable': seconds after which trying again makes sense. */
  retryAfterS?: number
}

const brand = Symbol.for('emberstave.AppError')

export class AppError extends Error {
  readonly [brand] = true
  readonly fields: FieldErrors
  readonly current: unknown
  readonly retryAfterS: number | undefined

  constructor(
    readonly kind: AppErrorKind,
    readonly detail: string,
    more: AppErrorMore = {},
  ) {
    super(`${kind}: ${detail}`)
    this.name = 'AppError'
    this.fields = more.fields ?? {}
    this.current = more.current
    this.retryAfterS = more.retryAfterS
  }
}

/** True for an AppError of any copy of this module (the server, the route bundle and the page bundle each have one). */
export function isAppError(error: unknown): error is AppError {
  return typeof error === 'object' && error !== null && Reflect.get(error, brand) === true
}

/** The sentence of one wrong field, as an 'invalid' error. */
export function invalidField(field: string, sentence: string): AppError {
  return new AppError('invalid', sentence, { fields: { [field]: sentence } })
}
