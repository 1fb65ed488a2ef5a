import { randomBytes } from 'node:crypto'
import type { NextRequest } from 'next/server'
import { NextResponse } from 'next/server'
import { pagePathHeader } from '@/lib/http/next-path'
import { dataPolicy, pagePolicy, securityHeaders } from '@/lib/http/security-headers'

/** Runs before every page and API answer but readings, which come too often and hold nothing for a browser. */
export function proxy(request: NextRequest): NextResponse {
  const isHttps = (process.env['APP_ORIGIN'] ?? '').startsWith('https:')
  const headers = securityHeaders(isHttps)
  if (request.nextUrl.pathname.startsWith('/api/')) {
    return withHeaders(NextResponse.next(), { ...headers, 'content-security-policy': dataPolicy })
  }
  const nonce = randomBytes(16).toString('base64')
  const policy = pagePolicy({
    nonce,
    host: request.headers.get('host') ?? request.nextUrl.host,
    isHttps,
    isDevelopment: process.env.NODE_ENV === 'development',
  })
  // Next reads the nonce for its own scripts from the policy of the request.
  const forPage = new Headers(request.headers)
  forPage.set('x-nonce', nonce)
  forPage.set(pagePathHeader, `${request.nextUrl.pathname}${request.nextUrl.search}`)
  forPage.set('content-security-policy', policy)
  return withHeaders(NextResponse.next({ request: { headers: forPage } }), {
    ...headers,
    'content-security-policy': policy,
  })
}

function withHeaders(response: NextResponse, headers: Record<string, string>): NextResponse {
  for (const [name, value] of Object.entries(headers)) response.headers.set(name, value)
  return response
}

export const config = { matcher: ['/((?!_next/|api/ingest/|licences/|favicon.ico).*)'] }
