import { existsSync, readFileSync, statSync } from 'node:fs'
import type { AddressInfo } from 'node:net'
import { createTransport } from 'nodemailer'
import { SMTPServer, type SMTPServerDataStream, type SMTPServerSession } from 'smtp-server'

interface Options {
  /** 0 lets the system choose. */
  port: number
  /** Where accepted mail goes on to. */
  mailboxPort: number
  /** A JSON list of addresses that the next server would refuse; read anew for each recipient. */
  refusedFile: string
}

export interface MailRelay {
  port: number
  close(): Promise<void>
}

const LARGEST_MESSAGE = 5 * 1024 * 1024
const LARGEST_RULES = 64 * 1024

/** A mail server on loopback that refuses chosen addresses, as the world's do, and passes the rest on. */
export async function startMailRelay({ port, mailboxPort, refusedFile }: Options): Promise<MailRelay> {
  const mailbox = createTransport({ host: '127.0.0.1', port: mailboxPort, secure: false, ignoreTLS: true })
  const server = new SMTPServer({
    disabledCommands: ['AUTH', 'STARTTLS'],
    size: LARGEST_MESSAGE,
    logger: false,
    disableReverseLookup: true,
    onRcptTo: ({ address }, _session, done) => {
      const refused = isRefused(address, refusedFile)
      done(refused ? smtpError(550, `5.1.1 No mailbox ${address} here`) : undefined)
    },
    onData: (stream, session, done) => {
      passOn(stream, session).then(
        () => done(null, 'Passed on'),
        (failure: Error) => done(failure),
      )
    },
  })

  async function passOn(stream: SMTPServerDataStream, session: SMTPServerSession): Promise<void> {
    const chunks: Buffer[] = []
    for await (const chunk of stream) chunks.push(chunk as Buffer)
    if (stream.sizeExceeded) throw smtpError(552, '5.3.4 The message is too large')
    const { mailFrom, rcptTo } = session.envelope
    try {
      await mailbox.sendMail({
        envelope: { from: mailFrom ? mailFrom.address : '', to: rcptTo.map(({ address }) => address) },
        raw: Buffer.concat(chunks),
      })
    } catch {
      throw smtpError(451, '4.3.0 The mailbox does not answer; try again later')
    }
  }

  // A client that hangs up half-way is its own affair.
  server.on('error', () => undefined)
  await new Promise<void>((resolve, reject) => {
    server.server.once('error', reject)
    server.listen(port, '127.0.0.1', () => resolve())
  })
  return {
    port: (server.server.address() as AddressInfo).port,
    close: async () => {
      mailbox.close()
      await new Promise<void>((resolve) => server.close(() => resolve()))
    },
  }
}

function isRefused(address: string, file: string): boolean {
  if (!existsSync(file)) return false
  if (statSync(file).size > LARGEST_RULES) return false
  try {
    const refused: unknown = JSON.parse(readFileSync(file, 'utf8'))
    return Array.isArray(refused) && refused.some((entry) => sameAddress(entry, address))
  } catch {
    // Caught while being written: no rule yet.
    return false
  }
}

function sameAddress(entry: unknown, address: string): boolean {
  return typeof entry === 'string' && entry.toLowerCase() === address.toLowerCase()
}

function smtpError(responseCode: number, message: string): Error {
  return Object.assign(new Error(message), { responseCode })
}
