import { createServer, type Server, type ServerResponse } from 'node:http'
import type { Mailbox, StoredMail } from './mailbox'

const BANNER = 'Local fake: nothing leaves this machine'

/** Emberstave's desk greys (look/LOOK.md), without its fonts: this page stands alone. */
const STYLE = `
:root { color-scheme: light; }
body { margin: 0 auto; max-width: 58rem; padding: 1.5rem; background: #f8fbfc; color: #10161a;
  font: 15px/1.5 system-ui, sans-serif; }
.banner { border-bottom: 1px solid #cdd6db; color: #9d6300; font-weight: 640; padding-bottom: .75rem; }
h1 { font-size: 27px; font-weight: 640; margin: 1rem 0; }
table { border-collapse: collapse; width: 100%; }
th { color: #4f565b; font-size: 13.5px; font-weight: 500; text-align: left; }
th, td { border-bottom: 1px solid #cdd6db; padding: .5rem .75rem .5rem 0; vertical-align: top; overflow-wrap: anywhere; }
td.time { white-space: nowrap; font-variant-numeric: tabular-nums; }
a { color: #00697b; }
dl { display: grid; grid-template-columns: max-content 1fr; gap: .25rem 1rem; margin: 0 0 1rem; }
dt { color: #4f565b; } dd { margin: 0; overflow-wrap: anywhere; }
pre { white-space: pre-wrap; overflow-wrap: anywhere; font: inherit; background: #fff; border: 1px solid #cdd6db;
  border-radius: 4px; padding: 1rem; }
`

/** Shows what was sent: a list, each mail as text, and `/messages.json` for tests. Loopback only. */
export function startMailPage(port: number, mailbox: Mailbox): Promise<Server> {
  const server = createServer((request, response) => {
    const path = new URL(request.url ?? '/', 'http://localhost').pathname
    if (request.method !== 'GET' && request.method !== 'HEAD') reply(response, 405, 'text/plain', 'Only GET.')
    else if (path === '/') reply(response, 200, 'text/html', listPage(mailbox.list()))
    else if (path === '/messages.json')
      reply(response, 200, 'application/json', JSON.stringify(mailbox.list()))
    else replyWithMail(response, mailbox.find(/^\/messages\/([0-9a-f-]{36})$/.exec(path)?.[1] ?? ''))
  })
  return new Promise((resolve, reject) => {
    server.once('error', reject)
    server.listen(port, '127.0.0.1', () => resolve(server))
  })
}

function replyWithMail(response: ServerResponse, mail: StoredMail | null) {
  if (mail === null)
    reply(
      response,
      404,
      'text/html',
      frame('Not here', '<p>There is no such mail. <a href="/">All mails</a></p>'),
    )
  else reply(response, 200, 'text/html', mailPage(mail))
}

function reply(response: ServerResponse, status: number, type: string, body: string) {
  response
    .writeHead(status, {
      'content-type': `${type}; charset=utf-8`,
      'cache-control': 'no-store',
      'content-security-policy':
        "default-src 'none'; style-src 'unsafe-inline'; base-uri 'none'; frame-ancestors 'none'",
      'referrer-policy': 'no-referrer',
      'x-content-type-options': 'nosniff',
    })
    .end(body)
}

function frame(title: string, body: string): string {
  return `<!doctype html><html lang="en"><head><meta charset="utf-8"><title>${escapeHtml(title)}</title>
<meta name="viewport" content="width=device-width"><style>${STYLE}</style></head>
<body><div class="banner" role="note">${BANNER}</div><main><h1>${escapeHtml(title)}</h1>${body}</main></body></html>`
}

function listPage(mails: readonly StoredMail[]): string {
  if (mails.length === 0) {
    return frame(
      'Mails',
      '<p>Nothing was sent yet. Invite somebody, or ask for a new password, and it appears here.</p>',
    )
  }
  const rows = mails.map(
    (
      mail,
    ) => `<tr><td class="time">${timeOf(mail)}</td><td>${escapeHtml(mail.recipients.join(', ') || mail.to)}</td>
<td><a href="/messages/${mail.id}">${escapeHtml(mail.subject || '(no subject)')}</a></td></tr>`,
  )
  return frame(
    'Mails',
    `<table><thead><tr><th scope="col">Sent, UTC</th><th scope="col">To</th><th scope="col">Subject</th></tr></thead>
<tbody>${rows.join('')}</tbody></table>`,
  )
}

function mailPage(mail: StoredMail): string {
  const attachments = mail.attachments.map((one) => `<dt>Not shown</dt><dd>${escapeHtml(one)}</dd>`).join('')
  return frame(
    mail.subject || '(no subject)',
    `<dl><dt>Sent, UTC</dt><dd>${timeOf(mail)}</dd><dt>From</dt><dd>${escapeHtml(mail.from)}</dd>
<dt>To</dt><dd>${escapeHtml(mail.recipients.join(', ') || mail.to)}</dd>${attachments}</dl>
<pre>${withLinks(mail.text)}</pre><p><a href="/">All mails</a></p>`,
  )
}

function timeOf(mail: StoredMail): string {
  return mail.receivedAt.slice(0, 19).replace('T', ' ')
}

/** Text with its http addresses made clickable; a full stop or bracket after an address is not part of it. */
export function withLinks(text: string): string {
  return text
    .split(/(https?:\/\/[^\s<>"']*[^\s<>"'.,;:!?)\]])/)
    .map((piece, i) =>
      i % 2 === 1 ? `<a href="${escapeHtml(piece)}">${escapeHtml(piece)}</a>` : escapeHtml(piece),
    )
    .join('')
}

function escapeHtml(text: string): string {
  return text
    .replaceAll('&', '&amp;')
    .replaceAll('<', '&lt;')
    .replaceAll('>', '&gt;')
    .replaceAll('"', '&quot;')
    .replaceAll("'", '&#39;')
}
