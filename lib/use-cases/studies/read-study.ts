import { findCurrentAnalysis } from '../analyses/analysis-input'
import { readClock } from '@/db/queries/clock'
import { findAnalysisProgress } from '@/db/queries/analyses'
import { listCommittee } from '@/db/queries/committee'
import { listInvitations } from '@/db/queries/laboratories'
import { findOpenProposal, findPublication } from '@/db/queries/publications'
import { countReturns } from '@/db/queries/returns'
import { findStudyFor, readLayout, type StudyLayoutRecord, type StudyRecord } from '@/db/queries/studies'
import type { Context } from '@/lib/context'
import { NotFound } from '@/lib/domain/errors'
import { authorise } from '@/lib/domain/permissions'

export interface StudyView {
  readonly study: StudyRecord
  readonly layout: StudyLayoutRecord
  readonly now: Date
  readonly counts: {
    invited: number
    accepted: number
    declined: number
    returned: number
    committee: number
  }
  readonly analysis: { number: number; upToDate: boolean } | null
  readonly computing: boolean
  readonly proposed: boolean
  readonly publishedAs: string | null
}

/** A study as its coordinator sees it: the plan, and how far each station has come. Names no laboratory. */
export async function readStudy(context: Context, { studyId }: { studyId: string }): Promise<StudyView> {
  const { db, actor } = context
  const study = await findStudyFor(db, actor, studyId)
  if (!study) throw new NotFound('study')
  authorise(actor, 'study.read', study)
  const [layout, now, invitations, returns, committee, analysis, progress, proposal, publication] =
    await Promise.all([
      readLayout(db, studyId),
      readClock(db),
      listInvitations(db, studyId),
      countReturns(db, studyId),
      listCommittee(db, studyId),
      findCurrentAnalysis(db, studyId),
      findAnalysisProgress(db, studyId),
      findOpenProposal(db, studyId),
      findPublication(db, studyId),
    ])
  return {
    study,
    layout,
    now,
    counts: {
      invited: invitations.length,
      accepted: invitations.filter(({ answer }) => answer === 'accepted').length,
      declined: invitations.filter(({ answer }) => answer === 'declined').length,
      returned: returns.returned,
      committee: committee.length,
    },
    analysis: analysis ? { number: analysis.number, upToDate: analysis.upToDate } : null,
    computing: progress ? !progress.done : false,
    proposed: proposal !== undefined,
    publishedAs: publication?.slug ?? null,
  }
}
