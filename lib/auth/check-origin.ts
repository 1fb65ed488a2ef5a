import { env } from '@/lib/env'
import { AppError } from '@/lib/errors'

/**
 * Refuses a write that a browser sends from another site. Browsers always say where a write comes from; a
 * program that sends neither header carries its own credentials and is not led by a page.
 */
export function checkOrigin(request: Request): void {
  if (request.method === 'GET' || request.method === 'HEAD') return
  const origin = request.headers.get('origin')
  const site = request.headers.get('sec-fetch-site')
  const isForeignSite = site !== null && site !== 'same-origin' && site !== 'none'
  const isForeignOrigin = origin !== null && origin !== new URL(env().APP_ORIGIN).origin
  if (isForeignSite || isForeignOrigin) {
    throw new AppError('not allowed', `Writes are taken from ${new URL(env().APP_ORIGIN).origin} only.`)
  }
}
