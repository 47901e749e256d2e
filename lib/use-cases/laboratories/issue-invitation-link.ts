import type { Transaction } from 'kysely'
import { findInvitation, insertInvitationLink } from '@/db/queries/laboratories'
import type { DB } from '@/db/tables'
import type { AnonymousContext } from '@/lib/context'
import type { Actor } from '@/lib/domain/actor'
import { NotFound } from '@/lib/domain/errors'
import { queueMail } from '@/lib/mail/queue-mail'

/** Makes the next link of an invitation, which takes the place of earlier ones, and queues its mail. */
export async function issueInvitationLink(
  trx: Transaction<DB>,
  context: AnonymousContext & { actor?: Actor },
  { studyId, invitationId }: { studyId: string; invitationId: string },
): Promise<{ number: number }> {
  const invitation = await findInvitation(trx, { studyId, invitationId })
  if (!invitation) throw new NotFound('invitation')
  const number = (invitation.lastLink?.number ?? 0) + 1
  const token = context.secrets.token('invitation', `${invitationId}.${number}`)
  await insertInvitationLink(trx, {
    studyId,
    invitationId,
    number,
    tokenHash: context.secrets.hash(token),
    personId: context.actor?.personId ?? null,
  })
  await queueMail(trx, context.jobs, {
    kind: 'invitation',
    studyId,
    recipient: invitation.address,
    ids: { studyId, invitationId, link: String(number) },
    dedupeKey: `invitation.${invitationId}.${number}`,
  })
  return { number }
}
