import { AppError } from '@/lib/errors'

/** The five-letter SQLSTATE or the socket's code of whatever the driver threw, looked for along its causes. */
export function databaseErrorCode(error: unknown): string | null {
  let at: unknown = error
  for (let depth = 0; depth < 6 && typeof at === 'object' && at !== null; depth += 1) {
    const code: unknown = Reflect.get(at, 'code')
    if (typeof code === 'string') return code
    at = Reflect.get(at, 'cause') ?? Reflect.get(at, 'previous')
  }
  return null
}

const unavailableCodes = new Set([
  'ECONNREFUSED',
  'ECONNRESET',
  'ENOTFOUND',
  'ETIMEDOUT',
  'EPIPE',
  '57P01',
  '57P02',
  '57P03',
  '53300',
  '08000',
  '08001',
  '08003',
  '08004',
  '08006',
])

/** True when PostgreSQL is not answering, as opposed to having refused. */
export function isDatabaseUnavailable(error: unknown): boolean {
  const code = databaseErrorCode(error)
  if (code !== null && unavailableCodes.has(code)) return true
  if (!(error instanceof Error)) return false
  return /Connection terminated|Timeout acquiring a connection|timeout expired|timeout exceeded when trying to connect|ECONNREFUSED/i.test(
    error.message,
  )
}

export function databaseUnavailable(): AppError {
  return new AppError(
    'unavailable',
    'The database is not answering. Nothing typed is lost; readings wait in the gateway. Try again in a moment.',
    { retryAfterS: 5 },
  )
}

/** The name of the constraint or trigger that refused a statement, or null. */
export function violatedConstraint(error: unknown): string | null {
  let at: unknown = error
  for (let depth = 0; depth < 6 && typeof at === 'object' && at !== null; depth += 1) {
    const constraint: unknown = Reflect.get(at, 'constraint')
    if (typeof constraint === 'string') return constraint
    at = Reflect.get(at, 'cause') ?? Reflect.get(at, 'previous')
  }
  return null
}
