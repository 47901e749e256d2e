import {
  actsForLaboratory,
  deleteCommitteeMember,
  listCommittee,
  writeCommitteeMember,
  type CommitteeMemberRecord,
} from '@/db/queries/committee'
import { findStudyFor, type StudyRecord } from '@/db/queries/studies'
import { ensurePerson } from '@/db/queries/people'
import type { Context } from '@/lib/context'
import type { CommitteeRole } from '@/lib/domain/actor'
import { NotFound, Refusal } from '@/lib/domain/errors'
import { readMailAddress } from '@/lib/domain/mail-address'
import { authorise } from '@/lib/domain/permissions'
import { recordAudit } from '../record-audit'

/** Names a member of a study's committee, or gives one another role. */
export async function appointCommitteeMember(
  context: Context,
  {
    studyId,
    name,
    address,
    role: committeeRole,
  }: { studyId: string; name: string; address: string; role: CommitteeRole },
): Promise<void> {
  const read = readMailAddress(address)
  if (!name.trim()) throw new Refusal('name-needed', 'Give the name of the member.', 'name')
  await context.db.transaction().execute(async (trx) => {
    const study = await findStudyFor(trx, context.actor, studyId, { lock: 'update' })
    if (!study) throw new NotFound('study')
    const role = authorise(context.actor, 'committee.appoint', study)
    const { personId } = await ensurePerson(trx, { address: read, name: name.trim().slice(0, 120) })
    if (await actsForLaboratory(trx, { studyId, personId }))
      throw new Refusal(
        'acts-for-laboratory',
        'This person acts for a laboratory of the study and would know its code among the others. Name someone else.',
        'address',
      )
    await writeCommitteeMember(trx, {
      studyId,
      personId,
      role: committeeRole,
      addedBy: context.actor.personId,
    })
    await recordAudit(trx, {
      actor: context.actor,
      role,
      studyId,
      fact: { action: 'committee.appointed', version: 1, personId, role: committeeRole },
    })
  })
}

export async function dismissCommitteeMember(
  context: Context,
  { studyId, personId }: { studyId: string; personId: string },
): Promise<void> {
  await context.db.transaction().execute(async (trx) => {
    const study = await findStudyFor(trx, context.actor, studyId, { lock: 'update' })
    if (!study) throw new NotFound('study')
    const role = authorise(context.actor, 'committee.appoint', study)
    if (!(await deleteCommitteeMember(trx, { studyId, personId }))) throw new NotFound('member')
    await recordAudit(trx, {
      actor: context.actor,
      role,
      studyId,
      fact: { action: 'committee.dismissed', version: 1, personId },
    })
  })
}

export async function readCommittee(
  context: Context,
  { studyId }: { studyId: string },
): Promise<{ study: StudyRecord; members: CommitteeMemberRecord[] }> {
  const study = await findStudyFor(context.db, context.actor, studyId)
  if (!study) throw new NotFound('study')
  authorise(context.actor, 'committee.appoint', study)
  return { study, members: await listCommittee(context.db, studyId) }
}
