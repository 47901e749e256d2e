import type { Context } from '@/lib/context'
import { readClock } from '@/db/queries/clock'
import { insertDeadline, insertState, insertStudy, replaceLayout } from '@/db/queries/studies'
import { readDeadline } from '@/lib/domain/deadline'
import { authorise } from '@/lib/domain/permissions'
import type { StudyPlan } from '@/lib/domain/study-plan'
import { recordAudit } from '../record-audit'
import { refuseTakenShortName, requireFuture } from './plan-rules'

/** Opens a new study as a draft of the organisation; nobody is written to yet. */
export async function createStudy(
  context: Context,
  { organisationId, plan }: { organisationId: string; plan: StudyPlan },
): Promise<{ studyId: string }> {
  const { actor } = context
  const role = authorise(actor, 'study.create', { organisationId })
  const deadline = readDeadline(plan.localTime, plan.zone, plan.choice)
  return context.db
    .transaction()
    .execute(async (trx) => {
      requireFuture(deadline, await readClock(trx))
      const studyId = await insertStudy(trx, { organisationId, plan, createdBy: actor.personId })
      await replaceLayout(trx, studyId, plan)
      await insertDeadline(trx, { studyId, deadline, personId: actor.personId })
      await insertState(trx, { studyId, state: 'draft', personId: actor.personId })
      await recordAudit(trx, {
        actor,
        role,
        studyId,
        fact: { action: 'study.created', version: 1, shortName: plan.shortName, title: plan.title },
      })
      return { studyId }
    })
    .catch(refuseTakenShortName)
}
