import type { Context } from '@/lib/context'
import { readClock } from '@/db/queries/clock'
import { findStudyFor, insertDeadline } from '@/db/queries/studies'
import { readDeadline } from '@/lib/domain/deadline'
import { NotFound } from '@/lib/domain/errors'
import { authorise } from '@/lib/domain/permissions'
import { requireState } from '@/lib/domain/study-states'
import { recordAudit } from '../record-audit'
import { requireFuture } from './plan-rules'

/** Moves the deadline of a draft or an open study. The earlier one stays in the record. */
export async function setDeadline(
  context: Context,
  {
    studyId,
    localTime,
    zone,
    choice,
  }: { studyId: string; localTime: string; zone: string; choice?: 'earlier' | 'later' },
): Promise<void> {
  const deadline = readDeadline(localTime, zone, choice)
  await context.db.transaction().execute(async (trx) => {
    const study = await findStudyFor(trx, context.actor, studyId, { lock: 'update' })
    if (!study) throw new NotFound('study')
    const role = authorise(context.actor, 'deadline.set', study)
    requireState(study.state, 'draft', 'open')
    requireFuture(deadline, await readClock(trx))
    await insertDeadline(trx, { studyId, deadline, personId: context.actor.personId })
    await recordAudit(trx, {
      actor: context.actor,
      role,
      studyId,
      fact: { action: 'deadline.set', version: 1, before: study.deadline, after: deadline },
    })
  })
}
