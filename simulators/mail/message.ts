/*
 * Reads the mails that Emberstave itself writes: RFC 5322 headers with RFC 2047 encoded words, a text/plain body in
 * 7bit, 8bit, quoted-printable or base64, alone or as a part of a multipart. Other parts are only named.
 */

export type MailMessage = {
  from: string
  to: string
  subject: string
  /** As written in the mail; null when it has none that can be read. */
  sentAt: string | null
  text: string
  /** Parts that are not shown, by type and name. */
  attachments: string[]
}

type Part = { headers: Map<string, string>; body: Buffer }

/** Never throws: what cannot be read is shown raw. */
export function readMessage(raw: Buffer): MailMessage {
  const whole = splitPart(raw)
  const leaves = leavesOf(whole, 0)
  const text = leaves.find((part) => isPlainText(part) && !isAttachment(part))
  const header = (name: string) => decodeWords(whole.headers.get(name) ?? '')
  return {
    from: header('from'),
    to: header('to'),
    subject: header('subject'),
    sentAt: readDate(header('date')),
    text: text === undefined ? '' : decodeBody(text).replaceAll('\r\n', '\n'),
    attachments: leaves.filter((part) => part !== text).map(describePart),
  }
}

function splitPart(raw: Buffer): Part {
  const text = raw.toString('latin1')
  const end = /\r?\n\r?\n/.exec(text)
  const headerText = end === null ? text : text.slice(0, end.index)
  const body = end === null ? Buffer.alloc(0) : raw.subarray(end.index + end[0].length)
  const headers = new Map<string, string>()
  for (const line of headerText.replaceAll(/\r?\n[ \t]+/g, ' ').split(/\r?\n/)) {
    const colon = line.indexOf(':')
    if (colon < 1) continue
    const name = line.slice(0, colon).trim().toLowerCase()
    // Header bytes beyond ASCII are UTF-8 where they occur at all (RFC 6532).
    if (!headers.has(name))
      headers.set(name, Buffer.from(line.slice(colon + 1).trim(), 'latin1').toString('utf8'))
  }
  return { headers, body }
}

function leavesOf(part: Part, depth: number): Part[] {
  const type = part.headers.get('content-type') ?? 'text/plain'
  const boundary = parameterOf(type, 'boundary')
  if (!type.toLowerCase().startsWith('multipart/') || boundary === null || depth > 5) return [part]
  const pieces = part.body.toString('latin1').split(`--${boundary}`).slice(1)
  return pieces
    .filter((piece) => !piece.startsWith('--'))
    .flatMap((piece) => {
      const content = piece.replace(/^[ \t]*\r?\n/, '').replace(/\r?\n$/, '')
      return leavesOf(splitPart(Buffer.from(content, 'latin1')), depth + 1)
    })
}

function isPlainText(part: Part): boolean {
  return (part.headers.get('content-type') ?? 'text/plain').toLowerCase().startsWith('text/plain')
}

function isAttachment(part: Part): boolean {
  return (part.headers.get('content-disposition') ?? '').toLowerCase().startsWith('attachment')
}

function describePart(part: Part): string {
  const type = part.headers.get('content-type') ?? 'text/plain'
  const name =
    parameterOf(part.headers.get('content-disposition') ?? '', 'filename') ?? parameterOf(type, 'name')
  const kind = type.split(';', 1)[0]?.trim() ?? type
  return name === null ? kind : `${decodeWords(name)} (${kind})`
}

function parameterOf(header: string, name: string): string | null {
  const found = new RegExp(`;\\s*${name}\\s*=\\s*(?:"([^"]*)"|([^;\\s]+))`, 'i').exec(header)
  return found === null ? null : (found[1] ?? found[2] ?? null)
}

function decodeBody(part: Part): string {
  const encoding = (part.headers.get('content-transfer-encoding') ?? '7bit').trim().toLowerCase()
  const charset = parameterOf(part.headers.get('content-type') ?? '', 'charset') ?? 'utf-8'
  if (encoding === 'base64')
    return decodeCharset(Buffer.from(part.body.toString('latin1'), 'base64'), charset)
  if (encoding === 'quoted-printable')
    return decodeCharset(decodeQuotedPrintable(part.body.toString('latin1')), charset)
  return decodeCharset(part.body, charset)
}

/** RFC 2045 section 6.7: `=XX` is a byte, `=` at a line's end joins it to the next. */
function decodeQuotedPrintable(text: string): Buffer {
  const joined = text.replaceAll(/=[ \t]*\r?\n/g, '')
  return Buffer.from(
    joined.replaceAll(/=([0-9a-f]{2})/gi, (_whole, hex: string) =>
      String.fromCharCode(Number.parseInt(hex, 16)),
    ),
    'latin1',
  )
}

/** RFC 2047: `=?charset?B|Q?text?=`; blanks between two encoded words belong to neither. */
function decodeWords(header: string): string {
  return header
    .replaceAll(/(=\?[^?\s]+\?[bq]\?[^?]*\?=)\s+(?==\?)/gi, '$1')
    .replaceAll(
      /=\?([^?\s]+)\?([bq])\?([^?]*)\?=/gi,
      (_whole, charset: string, kind: string, text: string) => {
        const isBase64 = kind.toLowerCase() === 'b'
        return decodeCharset(
          isBase64 ? Buffer.from(text, 'base64') : decodeQuotedPrintable(text.replaceAll('_', ' ')),
          charset,
        )
      },
    )
}

function decodeCharset(bytes: Buffer, charset: string): string {
  try {
    return new TextDecoder(charset).decode(bytes)
  } catch {
    return bytes.toString('latin1')
  }
}

function readDate(text: string): string | null {
  const atMs = Date.parse(text)
  return Number.isNaN(atMs) ? null : new Date(atMs).toISOString()
}
