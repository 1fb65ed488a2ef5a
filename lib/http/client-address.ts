import { isIP } from 'node:net'

/** Set by server.ts on every request, over whatever the client wrote there. */
export const clientAddressHeader = 'x-emberstave-address'

/**
 * Where a request comes from: the socket's peer, or, when the peer is a reverse proxy on this machine or one of
 * `trustedProxies`, the last entry that this proxy appended to X-Forwarded-For. Earlier entries are the client's word.
 */
export function peerAddress(
  peer: string | undefined,
  forwardedFor: string | undefined,
  trustedProxies: readonly string[] = [],
): string {
  const plain = plainAddress(peer)
  if (plain === null) return 'unknown'
  const isProxy = plain === '::1' || plain.startsWith('127.') || trustedProxies.includes(plain)
  return (isProxy ? plainAddress(forwardedFor?.split(',').at(-1)) : null) ?? plain
}

/** An IPv4 address mapped into IPv6 is written as IPv4; null for what is no address. */
function plainAddress(text: string | undefined): string | null {
  const trimmed = (text ?? '').trim().replace(/^::ffff:(?=\d+\.)/i, '')
  return isIP(trimmed) === 0 ? null : trimmed
}

/** The address that server.ts found; under plain `next dev` the one that Next notes. */
export function clientAddress(request: Request): string {
  const stamped = request.headers.get(clientAddressHeader)
  return (
    plainAddress(stamped ?? undefined) ??
    plainAddress(request.headers.get('x-forwarded-for')?.split(',').at(-1)) ??
    'unknown'
  )
}
