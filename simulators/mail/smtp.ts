import { SMTPServer } from 'smtp-server'
import type { Mailbox } from './mailbox'

const LARGEST_MAIL_BYTES = 10 * 1024 * 1024

/** Takes every mail and delivers none. Loopback only, without sign-in and without TLS: it is a fake. */
export function startSmtp(port: number, mailbox: Mailbox): Promise<SMTPServer> {
  const server = new SMTPServer({
    size: LARGEST_MAIL_BYTES,
    disabledCommands: ['AUTH', 'STARTTLS'],
    disableReverseLookup: true,
    logger: false,
    onData: (stream, session, done) => {
      const chunks: Buffer[] = []
      stream.on('data', (chunk: Buffer) => {
        if (!stream.sizeExceeded) chunks.push(chunk)
      })
      stream.on('end', () => {
        if (stream.sizeExceeded) {
          done(Object.assign(new Error('The mail is too large.'), { responseCode: 552 }))
          return
        }
        try {
          const recipients = session.envelope.rcptTo.map((recipient) => recipient.address)
          mailbox.add(Buffer.concat(chunks), recipients, new Date())
          done()
        } catch (error) {
          done(Object.assign(new Error(`It could not be kept: ${String(error)}`), { responseCode: 451 }))
        }
      })
    },
  })
  return new Promise((resolve, reject) => {
    server.once('error', reject)
    server.listen(port, '127.0.0.1', () => {
      server.off('error', reject)
      // A client that breaks off is its own affair.
      server.on('error', (error: Error) => console.log(`mail simulator: ${error.message}`))
      resolve(server)
    })
  })
}
