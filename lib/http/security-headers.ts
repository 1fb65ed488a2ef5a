/**
 * What every answer says to the browser. The nonce is new for each page; with 'strict-dynamic' the scripts that it
 * lets in may load the rest of the bundle and nothing else runs. Style *attributes* are let through, because React
 * writes them into the first HTML (a position on a chart); style *elements* need the nonce.
 */
export type PolicyOptions = {
  nonce: string
  /** The host that the page's socket goes back to, with its port. */
  host: string
  isHttps: boolean
  /** `next dev` evaluates strings and puts style elements in without a nonce. */
  isDevelopment: boolean
}

export function pagePolicy({ nonce, host, isHttps, isDevelopment }: PolicyOptions): string {
  // A host that is none (the header is the client's word) is left out; 'self' covers sockets in today's browsers.
  const socket = /^[\w.:[\]-]+$/.test(host) ? ` ${isHttps ? 'wss' : 'ws'}://${host}` : ''
  const directives = {
    'default-src': `'self'`,
    'script-src': `'self' 'nonce-${nonce}' 'strict-dynamic'${isDevelopment ? ` 'unsafe-eval'` : ''}`,
    'style-src': isDevelopment ? `'self' 'unsafe-inline'` : `'self' 'nonce-${nonce}'`,
    'style-src-attr': `'unsafe-inline'`,
    'img-src': `'self' data: blob:`,
    'font-src': `'self'`,
    'connect-src': `'self'${socket}`,
    'worker-src': `'self' blob:`,
    'manifest-src': `'self'`,
    'media-src': `'self'`,
    'frame-src': `'none'`,
    'object-src': `'none'`,
    'base-uri': `'none'`,
    'form-action': `'self'`,
    'frame-ancestors': `'none'`,
  }
  return Object.entries(directives)
    .map(([name, value]) => `${name} ${value}`)
    .join('; ')
}

/** An answer that is no page runs nothing and is framed by nobody. */
export const dataPolicy = `default-src 'none'; frame-ancestors 'none'; base-uri 'none'; form-action 'none'`

export function securityHeaders(isHttps: boolean): Record<string, string> {
  return {
    'x-content-type-options': 'nosniff',
    'referrer-policy': 'same-origin',
    'permissions-policy':
      'accelerometer=(), autoplay=(self), camera=(), display-capture=(), geolocation=(), gyroscope=(), magnetometer=(), microphone=(), midi=(), payment=(), screen-wake-lock=(self), usb=()',
    'cross-origin-opener-policy': 'same-origin',
    'cross-origin-resource-policy': 'same-origin',
    ...(isHttps ? { 'strict-transport-security': 'max-age=63072000; includeSubDomains' } : {}),
  }
}
