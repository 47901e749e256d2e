import type { Context } from '@/lib/context'
import { readClock } from '@/db/queries/clock'
import { findStudyFor, insertDeadline, readLayout, replaceLayout, updateStudy } from '@/db/queries/studies'
import { readDeadline } from '@/lib/domain/deadline'
import { NotFound } from '@/lib/domain/errors'
import { authorise } from '@/lib/domain/permissions'
import type { StudyPlan } from '@/lib/domain/study-plan'
import { requireState } from '@/lib/domain/study-states'
import { recordAudit } from '../record-audit'
import { refuseTakenShortName, requireFuture } from './plan-rules'

/** Changes the plan of a study that is still a draft: once laboratories are asked, what they are asked stands. */
export async function planStudy(
  context: Context,
  { studyId, plan }: { studyId: string; plan: StudyPlan },
): Promise<{ studyId: string }> {
  const { actor } = context
  const deadline = readDeadline(plan.localTime, plan.zone, plan.choice)
  return context.db
    .transaction()
    .execute(async (trx) => {
      const study = await findStudyFor(trx, actor, studyId, { lock: 'update' })
      if (!study) throw new NotFound('study')
      const role = authorise(actor, 'study.plan', study)
      requireState(study.state, 'draft')
      requireFuture(deadline, await readClock(trx))
      const before = { ...study, ...(await readLayout(trx, studyId)) }
      await updateStudy(trx, studyId, plan)
      await replaceLayout(trx, studyId, plan)
      if (study.deadline.at !== new Date(deadline.at).toISOString() || study.deadline.zone !== deadline.zone)
        await insertDeadline(trx, { studyId, deadline, personId: actor.personId })
      await recordAudit(trx, {
        actor,
        role,
        studyId,
        fact: { action: 'study.planned', version: 1, before: planOf(before), after: plan },
      })
      return { studyId }
    })
    .catch(refuseTakenShortName)
}

function planOf(study: {
  shortName: string
  title: string
  method: string
  purpose: string
  limitFactor: string
  deadline: { localTime: string; zone: string }
  measurands: unknown
  materials: unknown
  levels: unknown
}) {
  const { shortName, title, method, purpose, limitFactor, deadline, measurands, materials, levels } = study
  return {
    shortName,
    title,
    method,
    purpose,
    limitFactor,
    measurands,
    materials,
    levels,
    localTime: deadline.localTime,
    zone: deadline.zone,
  }
}
