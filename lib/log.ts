import { pino } from 'pino'
import type { Logger } from 'pino'
import { shared } from '@/lib/runtime'

/** The one logger; never given a password, a token or a cookie. */
export function log(): Logger {
  return shared('log', () =>
    pino({
      level: process.env['LOG_LEVEL'] ?? 'info',
      redact: {
        paths: ['password', 'token', 'cookie', '*.password', '*.token', '*.cookie'],
        censor: 'withheld',
      },
    }),
  )
}
