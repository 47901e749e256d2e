import type { Transaction } from 'kysely'
import { findStudyFor, insertState, type StudyRecord } from '@/db/queries/studies'
import type { DB } from '@/db/tables'
import type { Context } from '@/lib/context'
import type { Role } from '@/lib/domain/actor'
import { NotFound } from '@/lib/domain/errors'
import { authorise, type Action } from '@/lib/domain/permissions'
import { requireState, requireStep, type StudyState } from '@/lib/domain/study-states'

interface Step<Result> {
  readonly studyId: string
  readonly action: Action
  /** Two steps may lead to one state, such as opening and reopening; each has its own beginning. */
  readonly from: StudyState
  readonly to: StudyState
  readonly reason?: string
  /** What goes with the step, in its transaction; it refuses by throwing. */
  readonly alongside: (trx: Transaction<DB>, study: StudyRecord, role: Role) => Promise<Result>
}

/** One step of a study's course: the study's row is held, so that two steps, or a step and a return, never cross. */
export async function changeStudyState<Result>(context: Context, step: Step<Result>): Promise<Result> {
  return context.db.transaction().execute(async (trx) => {
    const study = await findStudyFor(trx, context.actor, step.studyId, { lock: 'update' })
    if (!study) throw new NotFound('study')
    const role = authorise(context.actor, step.action, study)
    requireState(study.state, step.from)
    requireStep(study.state, step.to)
    const result = await step.alongside(trx, study, role)
    await insertState(trx, {
      studyId: step.studyId,
      state: step.to,
      personId: context.actor.personId,
      reason: step.reason,
    })
    return result
  })
}
