import type { Transaction } from 'kysely'
import { insertAnalysisRequest } from '@/db/queries/analyses'
import { countReturns } from '@/db/queries/returns'
import { findStudyFor } from '@/db/queries/studies'
import type { DB } from '@/db/tables'
import type { Context } from '@/lib/context'
import { NotFound, Refusal } from '@/lib/domain/errors'
import { authorise } from '@/lib/domain/permissions'
import { requireState } from '@/lib/domain/study-states'
import { recordAudit } from '../record-audit'

/** Queues the computing of a new analysis from the returns and decisions as they stand. */
export async function requestAnalysis(
  context: Context,
  { studyId }: { studyId: string },
): Promise<{ number: number }> {
  return context.db.transaction().execute(async (trx) => {
    const study = await findStudyFor(trx, context.actor, studyId, { lock: 'update' })
    if (!study) throw new NotFound('study')
    const role = authorise(context.actor, 'analysis.run', study)
    requireState(study.state, 'open', 'closed')
    if ((await countReturns(trx, studyId)).returned === 0)
      throw new Refusal(
        'nothing-returned',
        'No laboratory has returned results yet, so there is nothing to compute.',
      )
    return queueAnalysis(trx, context, { studyId, role })
  })
}

/** The same as part of another change, such as setting a cell aside. */
export async function queueAnalysis(
  trx: Transaction<DB>,
  context: Context,
  { studyId, role }: { studyId: string; role: string },
): Promise<{ number: number }> {
  const number = await insertAnalysisRequest(trx, { studyId, personId: context.actor.personId })
  await recordAudit(trx, {
    actor: context.actor,
    role,
    studyId,
    fact: { action: 'analysis.requested', version: 1, number },
  })
  await context.jobs.enqueue(trx, 'analysis.run', { studyId, number })
  return { number }
}
