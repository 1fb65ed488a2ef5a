import { createHash, createHmac, timingSafeEqual } from 'node:crypto'

/*
 * AWS Signature Version 4 as object storage checks it: in the Authorization header, or in the query of an address
 * that was signed beforehand. After the public description of the scheme; the path of S3 is encoded once.
 */

export type Keys = { accessKeyId: string; secretAccessKey: string; region: string }

export type SignedRequest = {
  method: string
  /** As it came on the wire, with its query. */
  url: string
  headers: Readonly<Record<string, string | string[] | undefined>>
}

/** What object storage answers when it refuses: a status, one of S3's codes, and a sentence. */
export class FilesRefusal extends Error {
  constructor(
    readonly status: number,
    readonly code: string,
    sentence: string,
  ) {
    super(sentence)
    this.name = 'FilesRefusal'
  }
}

const ALGORITHM = 'AWS4-HMAC-SHA256'
const SKEW_MS = 15 * 60 * 1000
const LONGEST_S = 7 * 24 * 3600
const UNSIGNED = 'UNSIGNED-PAYLOAD'

type Claim = {
  credential: string
  signedHeaders: string[]
  signature: string
  timestamp: string
  payloadSha256: string
  /** Null for a signature in the header. */
  expiresS: number | null
}

/**
 * Holds the request against the keys. Answers the SHA-256 that its body must have, or null where the body was not
 * signed (an address signed beforehand).
 * @throws FilesRefusal 403 for a signature that is missing, wrong, out of time or of other keys; 400 for one that is no signature
 */
export function verifySignature(request: SignedRequest, keys: Keys, nowMs: number): string | null {
  const [path = '/', search = ''] = request.url.split(/\?(.*)/s)
  const query = parseQuery(search)
  const claim = query.has('X-Amz-Signature') ? claimOfQuery(query) : claimOfHeaders(request)
  const [accessKeyId = '', date = '', region = '', service = '', end = ''] = claim.credential.split('/')
  if (accessKeyId !== keys.accessKeyId)
    throw new FilesRefusal(403, 'InvalidAccessKeyId', 'There is no such access key here.')
  if (region !== keys.region || service !== 's3' || end !== 'aws4_request') {
    throw new FilesRefusal(
      400,
      'AuthorizationHeaderMalformed',
      `The credential must be of s3 in ${keys.region}.`,
    )
  }
  requireInTime(claim, date, nowMs)
  if (!claim.signedHeaders.includes('host'))
    throw new FilesRefusal(403, 'AccessDenied', 'The host must be signed.')
  const canonical = [
    request.method,
    canonicalPath(path),
    canonicalQuery(query),
    ...claim.signedHeaders.map((name) => `${name}:${headerOf(request, name)}`),
    '',
    claim.signedHeaders.join(';'),
    claim.payloadSha256,
  ].join('\n')
  const toSign = [ALGORITHM, claim.timestamp, `${date}/${region}/s3/aws4_request`, sha256(canonical)].join(
    '\n',
  )
  const expected = hmac(signingKey(keys.secretAccessKey, date, region), toSign).toString('hex')
  if (!isSame(expected, claim.signature)) {
    throw new FilesRefusal(403, 'SignatureDoesNotMatch', 'The signature does not fit this request.')
  }
  return claim.payloadSha256 === UNSIGNED ? null : claim.payloadSha256
}

function claimOfQuery(query: Query): Claim {
  const read = (name: string) => query.get(`X-Amz-${name}`)?.[0] ?? ''
  const expiresS = Number(read('Expires'))
  if (read('Algorithm') !== ALGORITHM || !Number.isInteger(expiresS) || expiresS < 1 || expiresS > LONGEST_S)
    throw new FilesRefusal(400, 'AuthorizationQueryParametersError', 'The signed address is malformed.')
  return {
    credential: read('Credential'),
    signedHeaders: read('SignedHeaders').split(';'),
    signature: read('Signature'),
    timestamp: read('Date'),
    payloadSha256: UNSIGNED,
    expiresS,
  }
}

function claimOfHeaders(request: SignedRequest): Claim {
  const header = headerOf(request, 'authorization')
  if (header === '') throw new FilesRefusal(403, 'AccessDenied', 'Sign the request.')
  const found =
    /^AWS4-HMAC-SHA256 Credential=([^,\s]+),\s*SignedHeaders=([^,\s]+),\s*Signature=([0-9a-f]{64})$/.exec(
      header,
    )
  if (found === null)
    throw new FilesRefusal(400, 'AuthorizationHeaderMalformed', 'The Authorization header is malformed.')
  const [, credential = '', signedHeaders = '', signature = ''] = found
  const payloadSha256 = headerOf(request, 'x-amz-content-sha256')
  if (payloadSha256 !== UNSIGNED && !/^[0-9a-f]{64}$/.test(payloadSha256))
    throw new FilesRefusal(400, 'InvalidRequest', 'x-amz-content-sha256 must be the hash of the body.')
  return {
    credential,
    signedHeaders: signedHeaders.split(';'),
    signature,
    timestamp: headerOf(request, 'x-amz-date'),
    payloadSha256,
    expiresS: null,
  }
}

function requireInTime({ timestamp, expiresS }: Claim, date: string, nowMs: number): void {
  const found = /^(\d{4})(\d\d)(\d\d)T(\d\d)(\d\d)(\d\d)Z$/.exec(timestamp)
  if (found === null || !timestamp.startsWith(date))
    throw new FilesRefusal(403, 'AccessDenied', 'The signature has no date.')
  const [, year, month, day, hour, minute, second] = found.map(Number)
  const signedMs = Date.UTC(year ?? 0, (month ?? 1) - 1, day, hour, minute, second)
  if (expiresS === null && Math.abs(nowMs - signedMs) > SKEW_MS)
    throw new FilesRefusal(403, 'RequestTimeTooSkewed', 'The clocks differ by more than 15 minutes.')
  if (expiresS !== null && (nowMs > signedMs + expiresS * 1000 || nowMs < signedMs - SKEW_MS))
    throw new FilesRefusal(403, 'AccessDenied', 'Request has expired')
}

type Query = ReadonlyMap<string, readonly string[]>

function parseQuery(search: string): Query {
  const query = new Map<string, string[]>()
  for (const part of search.split('&').filter((one) => one !== '')) {
    const [name = '', value = ''] = part.split(/=(.*)/s).map(decode)
    query.set(name, [...(query.get(name) ?? []), value])
  }
  return query
}

function decode(text: string): string {
  try {
    return decodeURIComponent(text)
  } catch {
    throw new FilesRefusal(400, 'InvalidURI', 'The address is not well encoded.')
  }
}

/** RFC 3986: everything but letters, figures and -._~ is written in per cent. */
function encode(text: string): string {
  return encodeURIComponent(text).replace(
    /[!'()*]/g,
    (sign) => `%${sign.charCodeAt(0).toString(16).toUpperCase()}`,
  )
}

function canonicalPath(path: string): string {
  return path
    .split('/')
    .map((segment) => encode(decode(segment)))
    .join('/')
}

function canonicalQuery(query: Query): string {
  return [...query]
    .filter(([name]) => name !== 'X-Amz-Signature')
    .flatMap(([name, values]) => values.map((value) => `${encode(name)}=${encode(value)}`))
    .sort()
    .join('&')
}

function headerOf(request: SignedRequest, name: string): string {
  const value = request.headers[name] ?? ''
  return (Array.isArray(value) ? value.join(',') : value).trim().replaceAll(/ +/g, ' ')
}

function signingKey(secret: string, date: string, region: string): Buffer {
  return hmac(hmac(hmac(hmac(`AWS4${secret}`, date), region), 's3'), 'aws4_request')
}

function hmac(key: string | Buffer, text: string): Buffer {
  return createHmac('sha256', key).update(text).digest()
}

function sha256(text: string): string {
  return createHash('sha256').update(text).digest('hex')
}

function isSame(expected: string, given: string): boolean {
  const [a, b] = [Buffer.from(expected), Buffer.from(given)]
  return a.length === b.length && timingSafeEqual(a, b)
}
