import { mkdtempSync, readdirSync, rmSync } from 'node:fs'
import type { AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { createTransport } from 'nodemailer'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import * as z from 'zod'
import { openMailbox, type Mailbox } from '@/simulators/mail/mailbox'
import { readMessage } from '@/simulators/mail/message'
import { startMailPage, withLinks } from '@/simulators/mail/page'
import { startSmtp } from '@/simulators/mail/smtp'

function portOf(address: AddressInfo | string | null | undefined): number {
  if (typeof address !== 'object' || address === null) throw new Error('no port')
  return address.port
}

describe('mail simulator', () => {
  let folder = ''
  let mailbox: Mailbox
  let send: (mail: { subject: string; text: string; to?: string }) => Promise<unknown>
  let pageUrl = ''
  let closeAll: () => Promise<void>

  beforeEach(async () => {
    folder = mkdtempSync(join(tmpdir(), 'emberstave-mail-'))
    mailbox = openMailbox(folder)
    const smtp = await startSmtp(0, mailbox)
    const page = await startMailPage(0, mailbox)
    pageUrl = `http://127.0.0.1:${portOf(page.address())}`
    const transport = createTransport({ host: '127.0.0.1', port: portOf(smtp.server.address()) })
    send = ({ to = 'ida@saltmarsh.example', ...mail }) =>
      transport.sendMail({ from: 'Emberstave <emberstave@localhost>', to, ...mail })
    closeAll = async () => {
      transport.close()
      page.closeAllConnections()
      await new Promise<void>((resolve) => smtp.close(() => page.close(() => resolve())))
    }
  })
  afterEach(async () => {
    await closeAll()
    rmSync(folder, { recursive: true })
  })

  it('keeps what was sent, word for word, with long lines, accents and degree signs', async () => {
    const text = `Liebe Zoë,\n\nyour barrel reached 200 °C = 63 min.\n${'a long line '.repeat(20)}end\n.\nhttps://localhost/link?token=abc=def\n`
    await send({
      subject: 'Your barrel at 200 °C – ready, and a subject that is long enough to be folded twice over',
      text,
    })
    const [mail] = mailbox.list()
    expect(mail).toMatchObject({
      subject: 'Your barrel at 200 °C – ready, and a subject that is long enough to be folded twice over',
      recipients: ['ida@saltmarsh.example'],
      attachments: [],
    })
    expect(mail?.text.trimEnd()).toBe(text.trimEnd())
    expect(mail?.from).toContain('emberstave@localhost')
  })

  it('shows a list, each mail, and JSON for tests; says that it is a fake; scripts in a mail stay text', async () => {
    await send({
      subject: '<script>alert(1)</script>',
      text: 'Open https://localhost:3000/reset?token=a&b=1.',
    })
    const list = await (await fetch(pageUrl)).text()
    expect(list).toContain('Local fake: nothing leaves this machine')
    expect(list).not.toContain('<script>')
    const answer = await (await fetch(`${pageUrl}/messages.json`)).json()
    const [message] = z
      .array(z.object({ id: z.string(), subject: z.string(), text: z.string() }))
      .parse(answer)
    expect(message?.subject).toBe('<script>alert(1)</script>')
    const page = await fetch(`${pageUrl}/messages/${message?.id}`)
    expect(await page.text()).toContain('<a href="https://localhost:3000/reset?token=a&amp;b=1">')
    expect(page.headers.get('content-security-policy')).toContain("default-src 'none'")
    expect((await fetch(`${pageUrl}/messages/00000000-0000-4000-8000-000000000000`)).status).toBe(404)
    expect((await fetch(pageUrl, { method: 'POST' })).status).toBe(405)
  })

  it('keeps the last 200, on disk too, through a restart', async () => {
    for (let i = 0; i < 203; i += 1) {
      mailbox.add(
        Buffer.from(`Subject: mail ${i}\r\n\r\ntext\r\n`),
        ['a@b.example'],
        new Date(1_790_000_000_000 + i),
      )
    }
    expect(mailbox.list()).toHaveLength(200)
    expect(mailbox.list()[0]?.subject).toBe('mail 202')
    expect(readdirSync(folder)).toHaveLength(200)
    const reopened = openMailbox(folder)
    expect(reopened.list()).toEqual(mailbox.list())
    expect(reopened.list().at(-1)?.subject).toBe('mail 3')
  })
})

describe('mail text', () => {
  it('reads base64, quoted-printable and multipart bodies', () => {
    const head = 'Subject: =?utf-8?Q?200_=C2=B0C?= =?utf-8?B?IGhvbGQ=?=\r\n'
    const base64 = `${head}Content-Type: text/plain; charset=utf-8\r\nContent-Transfer-Encoding: base64\r\n\r\n${Buffer.from('Grüße').toString('base64')}\r\n`
    expect(readMessage(Buffer.from(base64))).toMatchObject({ subject: '200 °C hold', text: 'Grüße' })
    const multipart = [
      'Subject: certificate',
      'Content-Type: multipart/mixed; boundary="--x y"',
      '',
      '----x y',
      'Content-Type: text/plain; charset=utf-8',
      'Content-Transfer-Encoding: quoted-printable',
      '',
      'dose =3D 63 =C2=B1 7 min, a line that =',
      'goes on',
      '----x y',
      'Content-Type: application/pdf; name=certificate.pdf',
      'Content-Disposition: attachment; filename=certificate.pdf',
      '',
      'JVBERi0=',
      '----x y--',
      '',
    ].join('\r\n')
    expect(readMessage(Buffer.from(multipart))).toMatchObject({
      text: 'dose = 63 ± 7 min, a line that goes on',
      attachments: ['certificate.pdf (application/pdf)'],
    })
  })

  it('a link ends before the full stop that follows it', () => {
    expect(withLinks('See http://a.example/x?y=1. Or (http://b.example)!')).toBe(
      'See <a href="http://a.example/x?y=1">http://a.example/x?y=1</a>. Or (<a href="http://b.example">http://b.example</a>)!',
    )
  })
})
