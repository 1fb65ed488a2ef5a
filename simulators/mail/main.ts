import { join } from 'node:path'
import * as z from 'zod'
import { openMailbox } from './mailbox'
import { startMailPage } from './page'
import { startSmtp } from './smtp'

/* The local fake of a mail server: takes what Emberstave mails, shows it on a page, sends nothing anywhere. */

const environmentSchema = z.object({
  MAIL_SMTP_PORT: z.coerce.number().int().min(0).max(65_535),
  MAIL_PAGE_PORT: z.coerce.number().int().min(0).max(65_535),
  DATA_DIR: z.string(),
})

async function main() {
  const environment = environmentSchema.parse(process.env)
  const mailbox = openMailbox(join(environment.DATA_DIR, 'mail'))
  const smtp = await startSmtp(environment.MAIL_SMTP_PORT, mailbox)
  const page = await startMailPage(environment.MAIL_PAGE_PORT, mailbox)
  console.log(`mail simulator: shows what is sent at http://localhost:${environment.MAIL_PAGE_PORT}`)
  for (const signal of ['SIGTERM', 'SIGINT'] as const) {
    process.once(signal, () => {
      smtp.close(() => page.close(() => process.exit(0)))
      page.closeAllConnections()
    })
  }
}

main().catch((error: unknown) => {
  const sentence = error instanceof z.ZodError ? z.prettifyError(error) : String(error)
  console.error(`mail simulator: ${sentence}`)
  process.exit(1)
})
