import nodemailer from 'nodemailer'
import type { LaidOutMail } from './letter'

export interface OutgoingMail extends LaidOutMail {
  readonly mailId: string
  readonly recipient: string
  readonly replyTo: string | null
}

export interface Delivery {
  /** "refused" is for good; "deferred" may go better later. */
  readonly outcome: 'sent' | 'refused' | 'deferred'
  readonly detail: string
}

/** Hands one mail to a mail server. */
export interface MailTransport {
  send(mail: OutgoingMail): Promise<Delivery>
  close(): void
}

export function createMailTransport({
  smtpUrl,
  mailFrom,
}: {
  smtpUrl: string
  mailFrom: string
}): MailTransport {
  const transporter = nodemailer.createTransport(
    { url: smtpUrl, connectionTimeout: 10_000, greetingTimeout: 10_000, socketTimeout: 30_000 },
    { from: mailFrom },
  )
  const sender = /<([^<>]+)>$/.exec(mailFrom)?.[1] ?? mailFrom
  const host = sender.split('@').at(-1) ?? 'localhost'

  return {
    async send({ mailId, recipient, replyTo, subject, text, html }) {
      try {
        const { response } = await transporter.sendMail({
          // One recipient, whatever a header might be made to say.
          envelope: { from: sender, to: [recipient] },
          to: { name: '', address: recipient },
          ...(replyTo ? { replyTo: { name: '', address: replyTo } } : {}),
          subject,
          text,
          html,
          // The same at every try, so that a mail sent twice by mischance is shown once.
          messageId: `<${mailId}@${host}>`,
          headers: { 'Auto-Submitted': 'auto-generated' },
          disableFileAccess: true,
          disableUrlAccess: true,
        })
        return { outcome: 'sent', detail: shorten(response) }
      } catch (error) {
        return describeFailure(error)
      }
    },
    close: () => transporter.close(),
  }
}

/**
 * A server that answers 5xx to the recipient or the message means it for good. Anything else - no connection, 4xx,
 * a password it does not accept - says nothing about the recipient and is tried again.
 */
function describeFailure(error: unknown): Delivery {
  if (!(error instanceof Error)) throw error
  const { responseCode, command, response, code } = error as Error & SmtpFault
  const aboutThisMail = command === 'RCPT TO' || command === 'DATA'
  const isFinal = aboutThisMail && responseCode !== undefined && responseCode >= 500
  return { outcome: isFinal ? 'refused' : 'deferred', detail: shorten(response ?? code ?? error.name) }
}

interface SmtpFault {
  responseCode?: number
  command?: string
  response?: string
  code?: string
}

function shorten(text: string): string {
  return text.replace(/\s+/g, ' ').slice(0, 300)
}
