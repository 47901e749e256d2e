import type { Context } from '@/lib/context'
import { readClock } from '@/db/queries/clock'
import { countReturns } from '@/db/queries/returns'
import { Refusal } from '@/lib/domain/errors'
import { recordAudit } from '../record-audit'
import { changeStudyState } from './change-study-state'

/**
 * Closes a study for returns. Before the deadline this needs a reason, since laboratories were promised the time.
 * @throws {Refusal} `reason-needed`, `nothing-returned`, `wrong-state`
 */
export async function closeStudy(
  context: Context,
  { studyId, reason }: { studyId: string; reason: string },
): Promise<void> {
  await changeStudyState(context, {
    studyId,
    action: 'study.close',
    from: 'open',
    to: 'closed',
    reason,
    alongside: async (trx, study, role) => {
      const early = (await readClock(trx)) < study.deadline.dueAt
      if (early && reason.trim().length < 10)
        throw new Refusal(
          'reason-needed',
          'The deadline has not passed. Say in a sentence why returns close now.',
          'reason',
        )
      const { returned, expected } = await countReturns(trx, studyId)
      if (returned === 0)
        throw new Refusal(
          'nothing-returned',
          'No laboratory has returned results yet, so there is nothing to scrutinise.',
        )
      await recordAudit(trx, {
        actor: context.actor,
        role,
        studyId,
        fact: { action: 'study.closed', version: 1, reason: reason.trim() || null, returned, expected },
      })
    },
  })
}
