import type { Transaction } from 'kysely'
import { insertMail } from '@/db/queries/mail'
import type { DB } from '@/db/tables'
import type { Jobs } from '@/lib/context'
import { mailKinds, type MailIds, type MailKind } from './mail-kinds'

interface QueuedMail<Kind extends MailKind> {
  readonly kind: Kind
  /** Left out only for mail that concerns no study. */
  readonly studyId?: string
  /** One address, in the form `readMailAddress` gives it. */
  readonly recipient: string
  readonly ids: MailIds<Kind>
  /** A mail with this key is written once, however often it is asked for. */
  readonly dedupeKey?: string
}

/**
 * Puts a mail into the outbox as part of a transaction: it is sent if and only if the change is made. It holds
 * ids, no words; these are found when it is sent, so that nothing in it is out of date.
 * @returns false when a mail with the same key was already there
 */
export async function queueMail<Kind extends MailKind>(
  trx: Transaction<DB>,
  jobs: Jobs,
  { kind, studyId, recipient, ids, dedupeKey }: QueuedMail<Kind>,
): Promise<boolean> {
  const subjectIds = mailKinds[kind].parse(ids)
  const mailId = await insertMail(trx, {
    kind,
    studyId: studyId ?? null,
    recipient,
    subjectIds,
    dedupeKey: dedupeKey ?? null,
  })
  if (!mailId) return false
  await jobs.enqueue(trx, 'mail.send', { mailId })
  return true
}
