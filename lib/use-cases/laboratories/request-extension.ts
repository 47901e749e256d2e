import { insertExtensionRequest } from '@/db/queries/participations'
import { listCoordinators } from '@/db/queries/people'
import type { Context } from '@/lib/context'
import { Refusal } from '@/lib/domain/errors'
import { requireState } from '@/lib/domain/study-states'
import { queueMail } from '@/lib/mail/queue-mail'
import { recordAudit } from '../record-audit'
import { ownParticipation } from '../returns/own-participation'

/** Asks the coordinators for more time, in the laboratory's own words. */
export async function requestExtension(
  context: Context,
  { studyId, message }: { studyId: string; message: string },
): Promise<void> {
  const words = message.trim()
  if (words.length < 10)
    throw new Refusal('message-needed', 'Say in a sentence how much time you need, and why.', 'message')
  if (words.length > 1000)
    throw new Refusal('message-too-long', 'Keep the message within 1000 characters.', 'message')
  await context.db.transaction().execute(async (trx) => {
    const { study, participation, role } = await ownParticipation(trx, context, {
      studyId,
      action: 'extension.request',
    })
    requireState(study.state, 'open', 'closed')
    const { participantId } = participation
    const requestId = await insertExtensionRequest(trx, {
      studyId,
      participantId,
      message: words,
      personId: context.actor.personId,
    })
    await recordAudit(trx, {
      actor: context.actor,
      role,
      studyId,
      fact: { action: 'extension.requested', version: 1, participantId },
    })
    for (const { address, personId } of await listCoordinators(trx, study.organisationId))
      await queueMail(trx, context.jobs, {
        kind: 'extension-requested',
        studyId,
        recipient: address,
        ids: { studyId, requestId },
        dedupeKey: `extension-requested.${requestId}.${personId}`,
      })
  })
}
