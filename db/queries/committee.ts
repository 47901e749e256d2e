import type { Kysely, Transaction } from 'kysely'
import type { DB } from '@/db/tables'
import type { CommitteeRole } from '@/lib/domain/actor'

export interface CommitteeMemberRecord {
  readonly personId: string
  readonly name: string
  readonly address: string
  readonly role: CommitteeRole
}

export async function listCommittee(db: Kysely<DB>, studyId: string): Promise<CommitteeMemberRecord[]> {
  const rows = await db
    .selectFrom('vault.committee_member as member')
    .innerJoin('vault.User as person', 'person.id', 'member.person_id')
    .where('member.study_id', '=', studyId)
    .orderBy('person.name')
    .select(['person.id as personId', 'person.name', 'person.email as address', 'member.role'])
    .execute()
  return rows.map((row) => ({ ...row, name: row.name ?? row.address, role: row.role as CommitteeRole }))
}

export async function writeCommitteeMember(
  trx: Transaction<DB>,
  row: { studyId: string; personId: string; role: CommitteeRole; addedBy: string },
): Promise<void> {
  await trx
    .insertInto('vault.committee_member')
    .values({ study_id: row.studyId, person_id: row.personId, role: row.role, added_by: row.addedBy })
    .onConflict((conflict) => conflict.columns(['study_id', 'person_id']).doUpdateSet({ role: row.role }))
    .execute()
}

export async function deleteCommitteeMember(
  trx: Transaction<DB>,
  { studyId, personId }: { studyId: string; personId: string },
): Promise<boolean> {
  const deleted = await trx
    .deleteFrom('vault.committee_member')
    .where('study_id', '=', studyId)
    .where('person_id', '=', personId)
    .executeTakeFirst()
  return deleted.numDeletedRows > 0n
}

/** Whether a person acts for a laboratory of the study. */
export async function actsForLaboratory(
  db: Kysely<DB>,
  { studyId, personId }: { studyId: string; personId: string },
): Promise<boolean> {
  const row = await db
    .selectFrom('vault.contact')
    .where('study_id', '=', studyId)
    .where('person_id', '=', personId)
    .select('participant_id')
    .executeTakeFirst()
  return row !== undefined
}
