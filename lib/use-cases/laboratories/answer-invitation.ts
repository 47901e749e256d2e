import {
  findInvitation,
  findInvitedStudy,
  insertInvitationAnswer,
  insertParticipant,
  listCodes,
} from '@/db/queries/laboratories'
import { ensurePerson } from '@/db/queries/people'
import { lockStudy } from '@/db/queries/studies'
import type { AnonymousContext } from '@/lib/context'
import { NotFound, Refusal } from '@/lib/domain/errors'
import { drawLaboratoryCode } from '@/lib/domain/laboratory-code'
import { recordAudit } from '../record-audit'
import { locateInvitation } from './read-invitation'

/**
 * Accepts or declines through a mailed link. Accepting draws the laboratory's code, once; it signs nobody in.
 * @returns the invited address, to which the caller has the sign-in mail sent
 * @throws {NotFound} for what is no link; {Refusal} `superseded`, `already-answered`, `closed`
 */
export async function answerInvitation(
  context: AnonymousContext,
  { token, answer }: { token: string; answer: 'accepted' | 'declined' },
): Promise<{ address: string }> {
  const found = await locateInvitation(context, token)
  if (!found) throw new NotFound('invitation')
  const { studyId, invitationId, superseded } = found.link
  return context.db.transaction().execute(async (trx) => {
    await lockStudy(trx, studyId)
    const [invitation, study] = [
      await findInvitation(trx, { studyId, invitationId }),
      await findInvitedStudy(trx, studyId),
    ]
    if (!invitation || !study) throw new NotFound('invitation')
    if (superseded)
      throw new Refusal('superseded', 'A newer link has taken the place of this one. Use the latest mail.')
    if (study.state !== 'open' || study.now > study.dueAt)
      throw new Refusal(
        'closed',
        'The deadline of this study has passed, so the invitation can no longer be answered.',
      )
    const role = 'invited laboratory'
    if (!(await insertInvitationAnswer(trx, { studyId, invitationId, answer })))
      throw new Refusal('already-answered', `This invitation was ${invitation.answer ?? 'answered'} before.`)
    if (answer === 'declined') {
      await recordAudit(trx, {
        actor: null,
        role,
        studyId,
        fact: { action: 'laboratory.declined', version: 1, invitationId },
      })
      return { address: invitation.address }
    }
    const { personId } = await ensurePerson(trx, {
      address: invitation.address,
      name: invitation.contactName,
    })
    const code = drawLaboratoryCode(context.random.below, new Set(await listCodes(trx, studyId)))
    await insertParticipant(trx, { studyId, invitationId, code, personId })
    await recordAudit(trx, {
      actor: null,
      role,
      studyId,
      fact: { action: 'laboratory.accepted', version: 1, invitationId },
    })
    return { address: invitation.address }
  })
}
