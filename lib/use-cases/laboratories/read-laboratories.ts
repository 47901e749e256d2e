import { readClock } from '@/db/queries/clock'
import { listInvitations, readKey, type InvitationRecord } from '@/db/queries/laboratories'
import { listMailStates, type MailState } from '@/db/queries/mail-states'
import { findStudyFor, type StudyRecord } from '@/db/queries/studies'
import type { Context } from '@/lib/context'
import { NotFound } from '@/lib/domain/errors'
import { authorise } from '@/lib/domain/permissions'
import { recordAudit } from '../record-audit'

export interface LaboratoriesView {
  readonly study: StudyRecord
  readonly now: Date
  readonly invitations: readonly (InvitationRecord & { mail: MailState | null })[]
}

/** The list of a study's laboratories by name, with what became of each invitation. Holds no code. */
export async function readLaboratories(
  context: Context,
  { studyId }: { studyId: string },
): Promise<LaboratoriesView> {
  const study = await findStudyFor(context.db, context.actor, studyId)
  if (!study) throw new NotFound('study')
  authorise(context.actor, 'laboratory.invite', study)
  const [now, invitations, mails] = await Promise.all([
    readClock(context.db),
    listInvitations(context.db, studyId),
    listMailStates(context.db, { studyId, kind: 'invitation' }),
  ])
  const states = new Map(mails.map((mail) => [mail.ids.invitationId, mail]))
  return {
    study,
    now,
    invitations: invitations.map((each) => ({ ...each, mail: states.get(each.invitationId) ?? null })),
  }
}

/** Which laboratory stands behind which code; reading it is recorded. */
export async function revealKey(
  context: Context,
  { studyId }: { studyId: string },
): Promise<{ code: string; laboratory: string }[]> {
  return context.db.transaction().execute(async (trx) => {
    const study = await findStudyFor(trx, context.actor, studyId)
    if (!study) throw new NotFound('study')
    const role = authorise(context.actor, 'key.read', study)
    const key = await readKey(trx, studyId)
    await recordAudit(trx, {
      actor: context.actor,
      role,
      studyId,
      fact: { action: 'key.read', version: 1, codes: key.length },
    })
    return key.map(({ code, laboratory }) => ({ code, laboratory }))
  })
}
