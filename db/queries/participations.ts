import { sql, type Kysely, type Transaction } from 'kysely'
import type { DB } from '@/db/tables'

export interface ParticipationRecord {
  readonly studyId: string
  readonly participantId: string
  readonly code: string
  readonly laboratory: string
  readonly zone: string
  readonly extendedTo: Date | null
}

/** The laboratory for which a person acts in a study: its own code and zone. */
export async function findParticipation(
  db: Kysely<DB>,
  place: { studyId: string; personId: string },
): Promise<ParticipationRecord | undefined> {
  return participationOf(db, place).executeTakeFirst()
}

/**
 * The statement of {@link findParticipation}, whose plan a test looks at.
 *
 * The participant is found first, and its other rows by their full keys. Joined by the study alone, as the planner did
 * while it did not know how many laboratories a new study has, this took ten seconds with 500 of them.
 */
export function participationOf(
  db: Kysely<DB>,
  { studyId, personId }: { studyId: string; personId: string },
) {
  return db
    .selectFrom('participant')
    .innerJoin('vault.identity as identity', (join) =>
      join
        .onRef('identity.study_id', '=', 'participant.study_id')
        .onRef('identity.participant_id', '=', 'participant.participant_id'),
    )
    .innerJoin('vault.invitation as invitation', (join) =>
      join
        .onRef('invitation.study_id', '=', 'identity.study_id')
        .onRef('invitation.invitation_id', '=', 'identity.invitation_id'),
    )
    .innerJoin('vault.laboratory as laboratory', (join) =>
      join
        .onRef('laboratory.organisation_id', '=', 'invitation.organisation_id')
        .onRef('laboratory.laboratory_id', '=', 'invitation.laboratory_id'),
    )
    .where('participant.study_id', '=', studyId)
    .where('participant.participant_id', '=', ({ selectFrom }) =>
      selectFrom('vault.contact')
        .select('participant_id')
        .where('study_id', '=', studyId)
        .where('person_id', '=', personId)
        .orderBy('participant_id')
        .limit(1),
    )
    .select([
      'participant.study_id as studyId',
      'participant.participant_id as participantId',
      'participant.code',
      'laboratory.name as laboratory',
      'invitation.zone',
      sql<Date | null>`(select max(due_at) from vault.extension e where e.study_id = participant.study_id and e.participant_id = participant.participant_id)`.as(
        'extendedTo',
      ),
    ])
}

export interface DraftRecord {
  readonly entries: Readonly<Record<string, string>>
  readonly remark: string
  readonly version: number
  readonly savedAt: Date
}

export async function findDraft(
  db: Kysely<DB>,
  { studyId, participantId }: { studyId: string; participantId: string },
): Promise<DraftRecord | undefined> {
  const row = await db
    .selectFrom('vault.draft')
    .where('study_id', '=', studyId)
    .where('participant_id', '=', participantId)
    .select(['entries', 'remark', 'version', 'saved_at as savedAt'])
    .executeTakeFirst()
  return row && { ...row, entries: row.entries as Record<string, string> }
}

/** Writes the draft if it still has the version the writer saw; undefined when another page wrote meanwhile. */
export async function writeDraft(
  trx: Transaction<DB>,
  draft: {
    studyId: string
    participantId: string
    entries: Record<string, string>
    remark: string
    seenVersion: number
    personId: string
  },
): Promise<{ version: number; savedAt: Date } | undefined> {
  const columns = { entries: JSON.stringify(draft.entries), remark: draft.remark, saved_by: draft.personId }
  return trx
    .insertInto('vault.draft')
    .values({
      study_id: draft.studyId,
      participant_id: draft.participantId,
      version: draft.seenVersion + 1,
      ...columns,
    })
    .onConflict((conflict) =>
      conflict
        .columns(['study_id', 'participant_id'])
        .doUpdateSet({ ...columns, version: draft.seenVersion + 1, saved_at: sql`clock_now()` })
        .where('vault.draft.version', '=', draft.seenVersion),
    )
    .returning(['version', 'saved_at as savedAt'])
    .executeTakeFirst()
}

export async function deleteDraft(
  trx: Transaction<DB>,
  { studyId, participantId }: { studyId: string; participantId: string },
): Promise<void> {
  await trx
    .deleteFrom('vault.draft')
    .where('study_id', '=', studyId)
    .where('participant_id', '=', participantId)
    .execute()
}

export async function insertExtensionRequest(
  trx: Transaction<DB>,
  row: { studyId: string; participantId: string; message: string; personId: string },
): Promise<string> {
  const { request_id } = await trx
    .insertInto('vault.extension_request')
    .values({
      study_id: row.studyId,
      participant_id: row.participantId,
      message: row.message,
      requested_by: row.personId,
    })
    .returning('request_id')
    .executeTakeFirstOrThrow()
  return request_id
}

export async function insertExtension(
  trx: Transaction<DB>,
  row: { studyId: string; participantId: string; dueAt: string; reason: string; personId: string },
): Promise<number> {
  const { number } = await trx
    .insertInto('vault.extension')
    .values((values) => ({
      study_id: row.studyId,
      participant_id: row.participantId,
      number: values
        .selectFrom('vault.extension')
        .select(sql<number>`coalesce(max(number), 0) + 1`.as('number'))
        .where('study_id', '=', row.studyId)
        .where('participant_id', '=', row.participantId),
      due_at: row.dueAt,
      reason: row.reason,
      granted_by: row.personId,
    }))
    .returning('number')
    .executeTakeFirstOrThrow()
  return number
}

/** Where the contacts of a laboratory read their mail. */
export async function listContactAddresses(
  db: Kysely<DB>,
  { studyId, participantId }: { studyId: string; participantId: string },
): Promise<{ personId: string; address: string }[]> {
  return db
    .selectFrom('vault.contact as contact')
    .innerJoin('vault.User as person', 'person.id', 'contact.person_id')
    .where('contact.study_id', '=', studyId)
    .where('contact.participant_id', '=', participantId)
    .select(['person.id as personId', 'person.email as address'])
    .execute()
}
