import type { Context } from '@/lib/context'
import { readClock } from '@/db/queries/clock'
import { insertDeadline } from '@/db/queries/studies'
import { readDeadline } from '@/lib/domain/deadline'
import { requireReason } from '@/lib/domain/reason'
import { recordAudit } from '../record-audit'
import { changeStudyState } from './change-study-state'
import { requireFuture } from './plan-rules'

/** Opens a closed study for returns again, with a new deadline and a reason. */
export async function reopenStudy(
  context: Context,
  {
    studyId,
    reason,
    localTime,
    zone,
    choice,
  }: { studyId: string; reason: string; localTime: string; zone: string; choice?: 'earlier' | 'later' },
): Promise<void> {
  requireReason(reason)
  const deadline = readDeadline(localTime, zone, choice)
  await changeStudyState(context, {
    studyId,
    action: 'study.close',
    from: 'closed',
    to: 'open',
    reason,
    alongside: async (trx, study, role) => {
      requireFuture(deadline, await readClock(trx))
      await insertDeadline(trx, { studyId, deadline, personId: context.actor.personId })
      await recordAudit(trx, {
        actor: context.actor,
        role,
        studyId,
        fact: { action: 'study.reopened', version: 1, reason },
      })
      await recordAudit(trx, {
        actor: context.actor,
        role,
        studyId,
        fact: { action: 'deadline.set', version: 1, before: study.deadline, after: deadline },
      })
    },
  })
}
