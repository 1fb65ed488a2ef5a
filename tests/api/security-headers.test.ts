import { describe, expect, test } from 'vitest'
import { clientAddress, clientAddressHeader, peerAddress } from '@/lib/http/client-address'
import { safeNextPath } from '@/lib/http/next-path'
import { pagePolicy, securityHeaders } from '@/lib/http/security-headers'

const page = { nonce: 'bm9uY2U=', host: 'toast.example', isHttps: true, isDevelopment: false }

describe('the content policy of a page', () => {
  test('lets in scripts by its nonce only, and no frame, object, base or foreign form', () => {
    const policy = pagePolicy(page)
    expect(policy).toContain(`script-src 'self' 'nonce-bm9uY2U=' 'strict-dynamic';`)
    expect(policy).not.toContain('unsafe-eval')
    expect(policy.match(/unsafe-inline/g)).toHaveLength(1)
    expect(policy).toContain(`style-src 'self' 'nonce-bm9uY2U='`)
    for (const part of ['frame-ancestors', 'object-src', 'base-uri'])
      expect(policy).toContain(`${part} 'none'`)
    expect(policy).toContain(`form-action 'self'`)
    expect(policy).toContain('wss://toast.example')
  })

  test('is not widened by a host header that is no host', () => {
    const policy = pagePolicy({ ...page, host: `x; script-src 'unsafe-inline'` })
    expect(policy).not.toContain(`script-src 'unsafe-inline'`)
  })
})

test('transport security is promised under https only', () => {
  expect(securityHeaders(true)['strict-transport-security']).toMatch(/max-age=\d{8}/)
  expect(securityHeaders(false)['strict-transport-security']).toBeUndefined()
})

describe('where a request comes from', () => {
  test('is the socket’s peer, whatever a stranger writes into X-Forwarded-For', () => {
    expect(peerAddress('203.0.113.9', '10.0.0.1')).toBe('203.0.113.9')
    expect(peerAddress('::ffff:203.0.113.9', undefined)).toBe('203.0.113.9')
  })

  test('is the last entry that a proxy on this machine, or a trusted one, appended', () => {
    expect(peerAddress('127.0.0.1', '6.6.6.6, 198.51.100.4')).toBe('198.51.100.4')
    expect(peerAddress('10.1.2.3', '6.6.6.6, 198.51.100.4', ['10.1.2.3'])).toBe('198.51.100.4')
    expect(peerAddress('127.0.0.1', 'not an address')).toBe('127.0.0.1')
  })

  test('is read from the server’s own header first', () => {
    const headers = { [clientAddressHeader]: '192.0.2.8', 'x-forwarded-for': '6.6.6.6' }
    expect(clientAddress(new Request('http://a.example', { headers }))).toBe('192.0.2.8')
  })
})

describe('the way back after signing in', () => {
  test.each([
    '//evil.example',
    '/\\evil.example',
    'https://evil.example',
    '/api/session',
    'javascript:alert(1)',
    '',
  ])('does not lead to %j', (text) => expect(safeNextPath(text)).toBe('/'))

  test('leads to a page of ours with its filters', () => {
    expect(safeNextPath('/firings?verdict=out&q=a%20b')).toBe('/firings?verdict=out&q=a%20b')
  })
})
