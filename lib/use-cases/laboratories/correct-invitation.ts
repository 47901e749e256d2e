import { findInvitation, updateInvitation } from '@/db/queries/laboratories'
import { findStudyFor } from '@/db/queries/studies'
import type { Context } from '@/lib/context'
import { NotFound, Refusal } from '@/lib/domain/errors'
import { readMailAddress } from '@/lib/domain/mail-address'
import { authorise } from '@/lib/domain/permissions'
import { requireState } from '@/lib/domain/study-states'
import { recordAudit } from '../record-audit'
import { issueInvitationLink } from './issue-invitation-link'

/**
 * Corrects whom an unanswered invitation is for. In an open study a new link is mailed to the new address, and the
 * one that went to the old address no longer works.
 */
export async function correctInvitation(
  context: Context,
  {
    studyId,
    invitationId,
    contactName,
    zone,
    ...typed
  }: { studyId: string; invitationId: string; contactName: string; address: string; zone: string },
): Promise<{ mailed: boolean }> {
  const address = readMailAddress(typed.address)
  return context.db.transaction().execute(async (trx) => {
    const study = await findStudyFor(trx, context.actor, studyId, { lock: 'update' })
    if (!study) throw new NotFound('study')
    const role = authorise(context.actor, 'laboratory.invite', study)
    requireState(study.state, 'draft', 'open')
    const invitation = await findInvitation(trx, { studyId, invitationId })
    if (!invitation) throw new NotFound('invitation')
    if (invitation.answer)
      throw new Refusal(
        'already-answered',
        `This laboratory has ${invitation.answer} the invitation already.`,
      )
    await updateInvitation(trx, { studyId, invitationId, address, contactName, zone })
    const link =
      study.state === 'open'
        ? (await issueInvitationLink(trx, context, { studyId, invitationId })).number
        : null
    await recordAudit(trx, {
      actor: context.actor,
      role,
      studyId,
      fact: { action: 'laboratory.corrected', version: 1, invitationId, link },
    })
    return { mailed: link !== null }
  })
}
