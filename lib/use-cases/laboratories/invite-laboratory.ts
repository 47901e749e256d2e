import { z } from 'zod'
import { insertInvitation, upsertLaboratory } from '@/db/queries/laboratories'
import { findStudyFor } from '@/db/queries/studies'
import type { Context } from '@/lib/context'
import { NotFound, Refusal } from '@/lib/domain/errors'
import { readMailAddress } from '@/lib/domain/mail-address'
import { authorise } from '@/lib/domain/permissions'
import { requireState } from '@/lib/domain/study-states'
import { recordAudit } from '../record-audit'
import { issueInvitationLink } from './issue-invitation-link'

const line = (what: string) =>
  z.string().trim().min(1, `Give ${what}.`).max(120, `Keep ${what} within 120 characters.`).refine((text) => !/[\p{Cc}\p{Cf}]/u.test(text), `Leave control characters out of ${what}.`)

export const laboratoryInvitation = z.object({
  laboratory: line('the name of the laboratory'),
  city: z.string().trim().max(80, 'Keep the town within 80 characters.').default(''),
  country: z.string().trim().max(80, 'Keep the country within 80 characters.').default(''),
  contactName: line('the name of the contact'),
  address: z.string(),
  zone: z.string().refine((zone) => Intl.supportedValuesOf('timeZone').includes(zone), 'Choose the time zone of the laboratory.'),
})

export type LaboratoryInvitation = z.infer<typeof laboratoryInvitation>

/** Puts a laboratory on the list of a study; in an open study its invitation is mailed at once. */
export async function inviteLaboratory(
  context: Context,
  { studyId, ...invitation }: LaboratoryInvitation & { studyId: string },
): Promise<{ invitationId: string; mailed: boolean }> {
  const { actor } = context
  const address = readMailAddress(invitation.address)
  return context.db
    .transaction()
    .execute(async (trx) => {
      const study = await findStudyFor(trx, actor, studyId, { lock: 'update' })
      if (!study) throw new NotFound('study')
      const role = authorise(actor, 'laboratory.invite', study)
      requireState(study.state, 'draft', 'open')
      const { organisationId } = study
      const laboratoryId = await upsertLaboratory(trx, {
        organisationId,
        name: invitation.laboratory,
        city: invitation.city,
        country: invitation.country,
      })
      const { contactName, zone } = invitation
      const invitationId = await insertInvitation(trx, {
        studyId,
        organisationId,
        laboratoryId,
        address,
        contactName,
        zone,
        personId: actor.personId,
      })
      await recordAudit(trx, { actor, role, studyId, fact: { action: 'laboratory.invited', version: 1, invitationId } })
      const mailed = study.state === 'open'
      if (mailed) await issueInvitationLink(trx, context, { studyId, invitationId })
      return { invitationId, mailed }
    })
    .catch((error: unknown) => {
      if (error instanceof Error && 'constraint' in error && error.constraint === 'invitation_laboratory_unique')
        throw new Refusal('already-invited', 'A laboratory of this name is on the list already.', 'laboratory')
      throw error
    })
}
