import { readClock } from '@/db/queries/clock'
import { insertExtension, listContactAddresses } from '@/db/queries/participations'
import { listReturnProgress } from '@/db/queries/returns'
import { findStudyFor } from '@/db/queries/studies'
import type { Context } from '@/lib/context'
import { readDeadline } from '@/lib/domain/deadline'
import { NotFound } from '@/lib/domain/errors'
import { authorise } from '@/lib/domain/permissions'
import { requireReason } from '@/lib/domain/reason'
import { requireState } from '@/lib/domain/study-states'
import { queueMail } from '@/lib/mail/queue-mail'
import { recordAudit } from '../record-audit'
import { requireFuture } from '../studies/plan-rules'

/** Gives one laboratory more time than the others; the coordinator knows it by its code alone here. */
export async function grantExtension(
  context: Context,
  {
    studyId,
    code,
    localTime,
    choice,
    reason,
  }: { studyId: string; code: string; localTime: string; choice?: 'earlier' | 'later'; reason: string },
): Promise<void> {
  requireReason(reason)
  await context.db.transaction().execute(async (trx) => {
    const study = await findStudyFor(trx, context.actor, studyId, { lock: 'update' })
    if (!study) throw new NotFound('study')
    const role = authorise(context.actor, 'laboratory.extend', study)
    requireState(study.state, 'open')
    const lane = (await listReturnProgress(trx, studyId)).find((each) => each.code === code)
    if (!lane) throw new NotFound('laboratory')
    const { participantId } = lane
    const deadline = readDeadline(localTime, study.deadline.zone, choice)
    requireFuture(deadline, await readClock(trx))
    const number = await insertExtension(trx, {
      studyId,
      participantId,
      dueAt: deadline.at,
      reason,
      personId: context.actor.personId,
    })
    await recordAudit(trx, {
      actor: context.actor,
      role,
      studyId,
      fact: { action: 'extension.granted', version: 1, participantId, dueAt: deadline.at, reason },
    })
    for (const { address, personId } of await listContactAddresses(trx, { studyId, participantId }))
      await queueMail(trx, context.jobs, {
        kind: 'extension-granted',
        studyId,
        recipient: address,
        ids: { studyId, participantId },
        dedupeKey: `extension-granted.${participantId}.${number}.${personId}`,
      })
  })
}
