import { createTransport } from 'nodemailer'
import type { Transporter } from 'nodemailer'
import { env } from '@/lib/env'
import { log } from '@/lib/log'
import { shared } from '@/lib/runtime'

export type Mail = {
  to: string
  subject: string
  /** Plain text; lines of any length. */
  text: string
}

/** Whether the mail server took it; `reason` is for the person who asked and tells nothing of the inside. */
export type MailResult = { isSent: true } | { isSent: false; reason: string }

function transport(url: string): Transporter {
  return shared(`mail ${url}`, () =>
    createTransport({
      url,
      connectionTimeout: 5_000,
      greetingTimeout: 5_000,
      socketTimeout: 10_000,
      disableFileAccess: true,
      disableUrlAccess: true,
    }),
  )
}

/**
 * Hands one mail to the server of SMTP_URL. Never throws: a mail that cannot go is logged and said, and undoes
 * nothing of what it was about.
 */
export async function sendMail(mail: Mail): Promise<MailResult> {
  const url = env().SMTP_URL
  if (url === undefined || url === '') {
    log().warn({ subject: mail.subject }, 'a mail was not sent: SMTP_URL is not set')
    return { isSent: false, reason: 'No mail server is set up here.' }
  }
  try {
    await transport(url).sendMail({
      from: env().MAIL_FROM,
      to: { name: '', address: mail.to },
      subject: mail.subject,
      text: mail.text,
      headers: { 'Auto-Submitted': 'auto-generated' },
    })
    return { isSent: true }
  } catch (error) {
    log().error({ err: error, subject: mail.subject }, 'a mail could not be sent')
    return { isSent: false, reason: 'The mail server did not take it.' }
  }
}
