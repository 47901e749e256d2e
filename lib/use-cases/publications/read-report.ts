import { findOpenProposal, findPublication } from '@/db/queries/publications'
import { findStudyFor, type StudyRecord } from '@/db/queries/studies'
import type { Context } from '@/lib/context'
import { NotFound } from '@/lib/domain/errors'
import { authorise, permittedRole } from '@/lib/domain/permissions'
import type { PublicationSnapshot } from '@/lib/domain/publication-snapshot'
import { findCurrentAnalysis } from '../analyses/analysis-input'

export interface ReportView {
  readonly study: StudyRecord
  readonly analysis: { number: number; digest: string; upToDate: boolean } | null
  readonly proposal: {
    digest: string
    proposedAt: Date
    proposer: string
    isOwn: boolean
    snapshot: PublicationSnapshot
  } | null
  readonly publication: { slug: string; confirmedAt: Date; proposer: string; confirmer: string } | null
  readonly mayPropose: boolean
  readonly mayConfirm: boolean
}

/** How far a study's publication has come, for those who propose and confirm it. */
export async function readReport(context: Context, { studyId }: { studyId: string }): Promise<ReportView> {
  const study = await findStudyFor(context.db, context.actor, studyId)
  if (!study) throw new NotFound('study')
  authorise(context.actor, 'publication.confirm', study)
  const [analysis, proposal, publication] = await Promise.all([
    findCurrentAnalysis(context.db, studyId),
    findOpenProposal(context.db, studyId),
    findPublication(context.db, studyId),
  ])
  const isOwn = proposal?.proposedBy === context.actor.personId
  return {
    study,
    analysis: analysis
      ? { number: analysis.number, digest: analysis.digest, upToDate: analysis.upToDate }
      : null,
    proposal: proposal
      ? {
          digest: proposal.digest,
          proposedAt: proposal.proposedAt,
          proposer: proposal.proposer,
          isOwn,
          snapshot: JSON.parse(proposal.snapshot) as PublicationSnapshot,
        }
      : null,
    publication: publication
      ? {
          ...publication,
          proposer: publication.proposer ?? 'a coordinator',
          confirmer: publication.confirmer ?? 'a second person',
        }
      : null,
    mayPropose: permittedRole(context.actor, 'publication.propose', study) !== undefined,
    mayConfirm: !isOwn,
  }
}
