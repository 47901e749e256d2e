import { findInvitation } from '@/db/queries/laboratories'
import { lockStudy } from '@/db/queries/studies'
import type { AnonymousContext } from '@/lib/context'
import { NotFound, Refusal } from '@/lib/domain/errors'
import { recordAudit } from '../record-audit'
import { issueInvitationLink } from './issue-invitation-link'
import { locateInvitation } from './read-invitation'

/** Mails a fresh link to the invited address, whoever asks with an old one; never to another address. */
export async function requestNewLink(context: AnonymousContext, { token }: { token: string }): Promise<void> {
  const found = await locateInvitation(context, token)
  if (!found) throw new NotFound('invitation')
  const { studyId, invitationId } = found.link
  if (found.study.state !== 'open')
    throw new Refusal('closed', 'This study no longer takes new laboratories.')
  await context.db.transaction().execute(async (trx) => {
    await lockStudy(trx, studyId)
    const invitation = await findInvitation(trx, { studyId, invitationId })
    if (!invitation || invitation.answer)
      throw new Refusal('already-answered', 'This invitation was answered before.')
    const recent =
      invitation.lastLink && found.study.now.getTime() - invitation.lastLink.issuedAt.getTime() < 5 * 60_000
    if (recent)
      throw new Refusal(
        'just-sent',
        'A new link was mailed a moment ago. Look for it, or ask again in five minutes.',
      )
    const { number } = await issueInvitationLink(trx, context, { studyId, invitationId })
    await recordAudit(trx, {
      actor: null,
      role: 'invited laboratory',
      studyId,
      fact: { action: 'laboratory.re-sent', version: 1, invitationId, link: number },
    })
  })
}
