import type { Context } from '@/lib/context'
import { readClock } from '@/db/queries/clock'
import { listInvitations } from '@/db/queries/laboratories'
import { Refusal } from '@/lib/domain/errors'
import { issueInvitationLink } from '../laboratories/issue-invitation-link'
import { recordAudit } from '../record-audit'
import { changeStudyState } from './change-study-state'
import { requireFuture } from './plan-rules'

/** Sends the invitations of a draft and opens it for returns. */
export async function openStudy(
  context: Context,
  { studyId }: { studyId: string },
): Promise<{ invitations: number }> {
  return changeStudyState(context, {
    studyId,
    action: 'study.open',
    from: 'draft',
    to: 'open',
    alongside: async (trx, study, role) => {
      requireFuture(study.deadline, await readClock(trx))
      const invitations = await listInvitations(trx, studyId)
      if (invitations.length < 2)
        throw new Refusal(
          'too-few-laboratories',
          'Name at least two laboratories first: with one there is nothing to compare.',
        )
      for (const { invitationId } of invitations)
        await issueInvitationLink(trx, context, { studyId, invitationId })
      await recordAudit(trx, {
        actor: context.actor,
        role,
        studyId,
        fact: { action: 'study.opened', version: 1, invitations: invitations.length },
      })
      return { invitations: invitations.length }
    },
  })
}
