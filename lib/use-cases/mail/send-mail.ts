import { finishMailAttempt, insertMailAttempt, unscopedFindMail, type MailRow } from '@/db/queries/mail'
import { readMailAddress } from '@/lib/domain/mail-address'
import { Refusal } from '@/lib/domain/errors'
import { composeMail, type ComposeParts } from '@/lib/mail/compose-mail'
import { layOutLetter } from '@/lib/mail/letter'
import type { Delivery, MailTransport } from '@/lib/mail/transport'

/** The mail server could not take a mail now; the job is to come again. */
export class MailDeferred extends Error {
  constructor() {
    super('mail deferred')
    this.name = 'MailDeferred'
  }
}

export type SendMailParts = ComposeParts & { readonly mail: MailTransport }

/**
 * Sends one mail from the outbox, unless it has met its end or is no longer wanted.
 *
 * The attempt is on record before the mail server hears of it: a worker that dies in between leaves an attempt
 * without an outcome, and the next one sends the mail under the same Message-ID.
 * @throws {MailDeferred} for the queue to try again
 */
export async function sendMail(parts: SendMailParts, { mailId }: { mailId: string }): Promise<void> {
  const row = await unscopedFindMail(parts.db, mailId)
  if (!row) return
  const number = await insertMailAttempt(parts.db, mailId)
  if (number === undefined) return
  const { outcome, detail } = await deliver(parts, row)
  await finishMailAttempt(parts.db, { mailId, number, outcome, detail })
  if (outcome === 'deferred') throw new MailDeferred()
}

async function deliver(
  parts: SendMailParts,
  row: MailRow,
): Promise<Delivery | { outcome: 'dropped'; detail: string }> {
  if (!isOneAddress(row.recipient)) return { outcome: 'dropped', detail: 'no recipient' }
  const composed = await composeMail(parts, row)
  if (!composed) return { outcome: 'dropped', detail: 'no longer wanted' }
  const { letter, replyTo } = composed
  return parts.mail.send({ mailId: row.mailId, recipient: row.recipient, replyTo, ...layOutLetter(letter) })
}

/** Looked at again at the door: nothing that is not plainly one address goes out. */
function isOneAddress(recipient: string): boolean {
  try {
    return readMailAddress(recipient) === recipient
  } catch (error) {
    if (error instanceof Refusal) return false
    throw error
  }
}
