import type { IncomingMessage, ServerResponse } from 'node:http'
import { env } from '@/lib/env'
import { clientAddressHeader, peerAddress } from '@/lib/http/client-address'
import { pagePathHeader } from '@/lib/http/next-path'
import { securityHeaders } from '@/lib/http/security-headers'

/**
 * What the server does to every request before Next sees it: notes where it comes from, over whatever the client
 * wrote there, and puts the security headers on the answer, files of the build included.
 */
export function prepareRequest(request: IncomingMessage, response: ServerResponse): void {
  const { APP_ORIGIN, TRUSTED_PROXIES } = env()
  const trusted = TRUSTED_PROXIES.split(',').map((address) => address.trim())
  const forwarded = request.headers['x-forwarded-for']
  const forwardedFor = Array.isArray(forwarded) ? forwarded.join(',') : forwarded
  request.headers[clientAddressHeader] = peerAddress(request.socket.remoteAddress, forwardedFor, trusted)
  Reflect.deleteProperty(request.headers, pagePathHeader)
  for (const [name, value] of Object.entries(securityHeaders(APP_ORIGIN.startsWith('https:')))) {
    response.setHeader(name, value)
  }
}
