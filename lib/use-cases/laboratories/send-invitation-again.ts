import { findInvitation } from '@/db/queries/laboratories'
import { findStudyFor } from '@/db/queries/studies'
import type { Context } from '@/lib/context'
import { NotFound, Refusal } from '@/lib/domain/errors'
import { authorise } from '@/lib/domain/permissions'
import { requireState } from '@/lib/domain/study-states'
import { recordAudit } from '../record-audit'
import { issueInvitationLink } from './issue-invitation-link'

/** Mails a new link to an invited laboratory that has not answered. The earlier link then says it was replaced. */
export async function sendInvitationAgain(
  context: Context,
  { studyId, invitationId }: { studyId: string; invitationId: string },
): Promise<void> {
  await context.db.transaction().execute(async (trx) => {
    const study = await findStudyFor(trx, context.actor, studyId, { lock: 'update' })
    if (!study) throw new NotFound('study')
    const role = authorise(context.actor, 'laboratory.invite', study)
    requireState(study.state, 'open')
    const invitation = await findInvitation(trx, { studyId, invitationId })
    if (!invitation) throw new NotFound('invitation')
    if (invitation.answer)
      throw new Refusal(
        'already-answered',
        `This laboratory has ${invitation.answer} the invitation already.`,
      )
    const { number } = await issueInvitationLink(trx, context, { studyId, invitationId })
    await recordAudit(trx, {
      actor: context.actor,
      role,
      studyId,
      fact: { action: 'laboratory.re-sent', version: 1, invitationId, link: number },
    })
  })
}
