import type { Transaction } from 'kysely'
import { z } from 'zod'
import { insertInvitation, upsertLaboratory } from '@/db/queries/laboratories'
import { findStudyFor } from '@/db/queries/studies'
import type { DB } from '@/db/tables'
import type { Context } from '@/lib/context'
import { NotFound, Refusal } from '@/lib/domain/errors'
import { readMailAddress } from '@/lib/domain/mail-address'
import { authorise } from '@/lib/domain/permissions'
import { requireState } from '@/lib/domain/study-states'
import { isTimeZone } from '@/lib/domain/time-zones'
import { recordAudit } from '../record-audit'
import { issueInvitationLink } from './issue-invitation-link'

const line = (what: string) =>
  z
    .string()
    .trim()
    .min(1, `Give ${what}.`)
    .max(120, `Keep ${what} within 120 characters.`)
    .refine((text) => !/[\p{Cc}\p{Cf}]/u.test(text), `Leave control characters out of ${what}.`)

export const laboratoryInvitation = z.object({
  laboratory: line('the name of the laboratory'),
  city: z.string().trim().max(80, 'Keep the town within 80 characters.').default(''),
  country: z.string().trim().max(80, 'Keep the country within 80 characters.').default(''),
  contactName: line('the name of the contact'),
  address: z.string(),
  zone: z.string().refine(isTimeZone, 'Choose the time zone of the laboratory.'),
})

export type LaboratoryInvitation = z.infer<typeof laboratoryInvitation>

/** Puts a laboratory on the list of a study; in an open study its invitation is mailed at once. */
export async function inviteLaboratory(
  context: Context,
  { studyId, ...invitation }: LaboratoryInvitation & { studyId: string },
): Promise<{ invitationId: string; mailed: boolean }> {
  const address = readMailAddress(invitation.address)
  return context.db
    .transaction()
    .execute(async (trx) => {
      const [invited] = await inviteAll(trx, context, { studyId, invitations: [{ ...invitation, address }] })
      if (!invited) throw new Error('an invitation was lost')
      return invited
    })
    .catch(refuseInvitedTwice)
}

/** Puts several on the list at once: all of them, or none. */
export async function inviteLaboratories(
  context: Context,
  { studyId, invitations }: { studyId: string; invitations: readonly LaboratoryInvitation[] },
): Promise<{ invited: number; mailed: boolean }> {
  const read = invitations.map((each) => ({ ...each, address: readMailAddress(each.address) }))
  return context.db
    .transaction()
    .execute(async (trx) => {
      const invited = await inviteAll(trx, context, { studyId, invitations: read })
      return { invited: invited.length, mailed: invited.some(({ mailed }) => mailed) }
    })
    .catch(refuseInvitedTwice)
}

async function inviteAll(
  trx: Transaction<DB>,
  context: Context,
  { studyId, invitations }: { studyId: string; invitations: readonly LaboratoryInvitation[] },
) {
  const { actor } = context
  const study = await findStudyFor(trx, actor, studyId, { lock: 'update' })
  if (!study) throw new NotFound('study')
  const role = authorise(actor, 'laboratory.invite', study)
  requireState(study.state, 'draft', 'open')
  const { organisationId } = study
  const mailed = study.state === 'open'
  const invited: { invitationId: string; mailed: boolean }[] = []
  for (const { laboratory: name, city, country, contactName, address, zone } of invitations) {
    const laboratoryId = await upsertLaboratory(trx, { organisationId, name, city, country })
    const row = {
      studyId,
      organisationId,
      laboratoryId,
      address,
      contactName,
      zone,
      personId: actor.personId,
    }
    const invitationId = await insertInvitation(trx, row)
    await recordAudit(trx, {
      actor,
      role,
      studyId,
      fact: { action: 'laboratory.invited', version: 1, invitationId },
    })
    if (mailed) await issueInvitationLink(trx, context, { studyId, invitationId })
    invited.push({ invitationId, mailed })
  }
  return invited
}

function refuseInvitedTwice(error: unknown): never {
  if (error instanceof Error && 'constraint' in error && error.constraint === 'invitation_laboratory_unique')
    throw new Refusal('already-invited', 'A laboratory of this name is on the list already.', 'laboratory')
  throw error
}
