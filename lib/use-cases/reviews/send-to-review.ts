import type { Context } from '@/lib/context'
import { Refusal } from '@/lib/domain/errors'
import { requireReason } from '@/lib/domain/reason'
import { findCurrentAnalysis } from '../analyses/analysis-input'
import { recordAudit } from '../record-audit'
import { changeStudyState } from '../studies/change-study-state'
import { withdrawOpenProposal } from '../publications/withdraw-proposal'

/** Puts a scrutinised study before its committee, by code. @throws {Refusal} `analysis-missing`, `analysis-stale` */
export async function sendToReview(context: Context, { studyId }: { studyId: string }): Promise<void> {
  await changeStudyState(context, {
    studyId,
    action: 'study.review',
    from: 'closed',
    to: 'in-review',
    alongside: async (trx, _study, role) => {
      const analysis = await findCurrentAnalysis(trx, studyId)
      if (!analysis)
        throw new Refusal('analysis-missing', 'Have the statistics computed first: the committee reads them.')
      if (!analysis.upToDate)
        throw new Refusal(
          'analysis-stale',
          'Returns or decisions have changed since the last analysis. Have it computed again first.',
        )
      await recordAudit(trx, {
        actor: context.actor,
        role,
        studyId,
        fact: { action: 'study.sent-to-review', version: 1, analysisId: analysis.analysisId },
      })
    },
  })
}

/** Takes a study back from its committee to scrutiny; a standing proposal to publish falls with it. */
export async function takeBackFromReview(
  context: Context,
  { studyId, reason }: { studyId: string; reason: string },
): Promise<void> {
  requireReason(reason)
  await changeStudyState(context, {
    studyId,
    action: 'study.review',
    from: 'in-review',
    to: 'closed',
    reason,
    alongside: async (trx, _study, role) => {
      await withdrawOpenProposal(trx, context, { studyId, role, reason })
      await recordAudit(trx, {
        actor: context.actor,
        role,
        studyId,
        fact: { action: 'study.taken-back', version: 1, reason },
      })
    },
  })
}
