import { randomUUID } from 'node:crypto'
import { mkdirSync, readFileSync, readdirSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { readMessage, type MailMessage } from './message'

export type StoredMail = MailMessage & {
  id: string
  receivedAt: string
  /** To whom the envelope said, which includes blind copies. */
  recipients: string[]
}

export type Mailbox = {
  add: (raw: Buffer, recipients: readonly string[], receivedAt: Date) => StoredMail
  /** Newest first. */
  list: () => readonly StoredMail[]
  find: (id: string) => StoredMail | null
}

const KEPT_MAILS = 200
const FILE_NAME = /^\d{13}-([0-9a-f-]{36})\.eml$/
const ENVELOPE_HEADER = 'X-Envelope-To: '

/** The last 200 mails, in memory and as one file each, so that a restart still shows them. */
export function openMailbox(folder: string): Mailbox {
  mkdirSync(folder, { recursive: true })
  let mails = readdirSync(folder)
    .filter((name) => FILE_NAME.test(name))
    .sort()
    .slice(-KEPT_MAILS)
    .map((name) => ({ name, mail: loadMail(folder, name) }))

  return {
    add: (raw, recipients, receivedAt) => {
      const id = randomUUID()
      const name = `${String(receivedAt.getTime()).padStart(13, '0')}-${id}.eml`
      const bytes = Buffer.concat([Buffer.from(`${ENVELOPE_HEADER}${recipients.join(', ')}\r\n`), raw])
      writeFileSync(join(folder, `${name}.new`), bytes)
      renameSync(join(folder, `${name}.new`), join(folder, name))
      const mail = loadMail(folder, name)
      mails = [...mails, { name, mail }]
      for (const old of mails.slice(0, -KEPT_MAILS)) rmSync(join(folder, old.name), { force: true })
      mails = mails.slice(-KEPT_MAILS)
      return mail
    },
    list: () => mails.map(({ mail }) => mail).reverse(),
    find: (id) => mails.find(({ mail }) => mail.id === id)?.mail ?? null,
  }
}

function loadMail(folder: string, name: string): StoredMail {
  const bytes = readFileSync(join(folder, name))
  const firstLine = bytes.subarray(0, bytes.indexOf('\r\n')).toString('utf8')
  const recipients = firstLine.startsWith(ENVELOPE_HEADER)
    ? firstLine.slice(ENVELOPE_HEADER.length).split(', ')
    : []
  return {
    id: FILE_NAME.exec(name)?.[1] ?? name,
    receivedAt: new Date(Number(name.slice(0, 13))).toISOString(),
    recipients,
    ...readMessage(bytes),
  }
}
