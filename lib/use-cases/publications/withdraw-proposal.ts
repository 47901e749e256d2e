import type { Transaction } from 'kysely'
import { findOpenProposal, insertProposalWithdrawn } from '@/db/queries/publications'
import { findStudyFor } from '@/db/queries/studies'
import type { DB } from '@/db/tables'
import type { Context } from '@/lib/context'
import { NotFound } from '@/lib/domain/errors'
import { authorise } from '@/lib/domain/permissions'
import { requireReason } from '@/lib/domain/reason'
import { requireState } from '@/lib/domain/study-states'
import { recordAudit } from '../record-audit'

/** Withdraws a proposal that nobody has confirmed. */
export async function withdrawProposal(
  context: Context,
  { studyId, reason }: { studyId: string; reason: string },
): Promise<void> {
  requireReason(reason)
  await context.db.transaction().execute(async (trx) => {
    const study = await findStudyFor(trx, context.actor, studyId, { lock: 'update' })
    if (!study) throw new NotFound('study')
    const role = authorise(context.actor, 'publication.propose', study)
    requireState(study.state, 'in-review')
    if (!(await withdrawOpenProposal(trx, context, { studyId, role, reason }))) throw new NotFound('proposal')
  })
}

/** The same as part of another step; false when no proposal stands. */
export async function withdrawOpenProposal(
  trx: Transaction<DB>,
  context: Context,
  { studyId, role, reason }: { studyId: string; role: string; reason: string },
): Promise<boolean> {
  const proposal = await findOpenProposal(trx, studyId)
  if (!proposal) return false
  const { proposalId } = proposal
  await insertProposalWithdrawn(trx, {
    studyId,
    proposalId,
    reason: reason.trim(),
    personId: context.actor.personId,
  })
  await recordAudit(trx, {
    actor: context.actor,
    role,
    studyId,
    fact: { action: 'publication.proposal-withdrawn', version: 1, proposalId, reason: reason.trim() },
  })
  return true
}
