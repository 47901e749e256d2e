import { sql, type Kysely, type Transaction } from 'kysely'
import type { DB } from '@/db/tables'

export interface InvitationRecord {
  readonly invitationId: string
  readonly laboratoryId: string
  readonly laboratory: string
  readonly city: string
  readonly country: string
  readonly address: string
  readonly contactName: string
  readonly zone: string
  readonly answer: 'accepted' | 'declined' | null
  readonly answeredAt: Date | null
  readonly participantId: string | null
  readonly lastLink: { number: number; issuedAt: Date } | null
}

/** Who is invited to a study, by name: for the coordinator alone. Codes are not here; see readKey. */
export async function listInvitations(db: Kysely<DB>, studyId: string): Promise<InvitationRecord[]> {
  const rows = await selectInvitations(db)
    .where('invitation.study_id', '=', studyId)
    .orderBy('laboratory.name')
    .execute()
  return rows.map(toInvitation)
}

export async function findInvitation(
  db: Kysely<DB>,
  { studyId, invitationId }: { studyId: string; invitationId: string },
): Promise<InvitationRecord | undefined> {
  const row = await selectInvitations(db)
    .where('invitation.study_id', '=', studyId)
    .where('invitation.invitation_id', '=', invitationId)
    .executeTakeFirst()
  return row && toInvitation(row)
}

function selectInvitations(db: Kysely<DB>) {
  return db
    .selectFrom('vault.invitation as invitation')
    .innerJoin('vault.laboratory as laboratory', (join) =>
      join
        .onRef('laboratory.organisation_id', '=', 'invitation.organisation_id')
        .onRef('laboratory.laboratory_id', '=', 'invitation.laboratory_id'),
    )
    .leftJoin('vault.invitation_answer as answer', (join) =>
      join
        .onRef('answer.study_id', '=', 'invitation.study_id')
        .onRef('answer.invitation_id', '=', 'invitation.invitation_id'),
    )
    .leftJoin('vault.identity as identity', (join) =>
      join
        .onRef('identity.study_id', '=', 'invitation.study_id')
        .onRef('identity.invitation_id', '=', 'invitation.invitation_id'),
    )
    .leftJoinLateral(
      (from) =>
        from
          .selectFrom('vault.invitation_link as each')
          .select(['each.number', 'each.issued_at'])
          .whereRef('each.study_id', '=', 'invitation.study_id')
          .whereRef('each.invitation_id', '=', 'invitation.invitation_id')
          .orderBy('each.number', 'desc')
          .limit(1)
          .as('link'),
      (join) => join.onTrue(),
    )
    .select([
      'invitation.invitation_id',
      'invitation.laboratory_id',
      'laboratory.name',
      'laboratory.city',
      'laboratory.country',
      'invitation.address',
      'invitation.contact_name',
      'invitation.zone',
      'answer.answer',
      'answer.answered_at',
      'identity.participant_id',
      'link.number',
      'link.issued_at',
    ])
}

function toInvitation(
  row: Awaited<ReturnType<ReturnType<typeof selectInvitations>['executeTakeFirstOrThrow']>>,
): InvitationRecord {
  return {
    invitationId: row.invitation_id,
    laboratoryId: row.laboratory_id,
    laboratory: row.name,
    city: row.city,
    country: row.country,
    address: row.address,
    contactName: row.contact_name,
    zone: row.zone,
    answer: row.answer as InvitationRecord['answer'],
    answeredAt: row.answered_at,
    participantId: row.participant_id,
    lastLink:
      row.number !== null && row.issued_at !== null ? { number: row.number, issuedAt: row.issued_at } : null,
  }
}

/** The organisation's laboratory of this name, made when it is new. */
export async function upsertLaboratory(
  trx: Transaction<DB>,
  {
    organisationId,
    name,
    city,
    country,
  }: { organisationId: string; name: string; city: string; country: string },
): Promise<string> {
  const { laboratory_id } = await trx
    .insertInto('vault.laboratory')
    .values({ organisation_id: organisationId, name, city, country })
    .onConflict((conflict) => conflict.constraint('laboratory_name_unique').doUpdateSet({ city, country }))
    .returning('laboratory_id')
    .executeTakeFirstOrThrow()
  return laboratory_id
}

export async function insertInvitation(
  trx: Transaction<DB>,
  row: {
    studyId: string
    organisationId: string
    laboratoryId: string
    address: string
    contactName: string
    zone: string
    personId: string
  },
): Promise<string> {
  const { invitation_id } = await trx
    .insertInto('vault.invitation')
    .values({
      study_id: row.studyId,
      organisation_id: row.organisationId,
      laboratory_id: row.laboratoryId,
      address: row.address,
      contact_name: row.contactName,
      zone: row.zone,
      invited_by: row.personId,
    })
    .returning('invitation_id')
    .executeTakeFirstOrThrow()
  return invitation_id
}

export async function updateInvitation(
  trx: Transaction<DB>,
  row: { studyId: string; invitationId: string; address: string; contactName: string; zone: string },
): Promise<void> {
  await trx
    .updateTable('vault.invitation')
    .set({ address: row.address, contact_name: row.contactName, zone: row.zone })
    .where('study_id', '=', row.studyId)
    .where('invitation_id', '=', row.invitationId)
    .execute()
}

export async function insertInvitationLink(
  trx: Transaction<DB>,
  link: { studyId: string; invitationId: string; number: number; tokenHash: string; personId: string | null },
): Promise<void> {
  await trx
    .insertInto('vault.invitation_link')
    .values({
      study_id: link.studyId,
      invitation_id: link.invitationId,
      number: link.number,
      token_hash: link.tokenHash,
      issued_by: link.personId,
    })
    .execute()
}

/** Where a link leads, and whether a later one has taken its place. */
export async function findInvitationLink(
  db: Kysely<DB>,
  tokenHash: string,
): Promise<{ studyId: string; invitationId: string; number: number; superseded: boolean } | undefined> {
  const row = await db
    .selectFrom('vault.invitation_link as link')
    .where('link.token_hash', '=', tokenHash)
    .select(['link.study_id', 'link.invitation_id', 'link.number'])
    .select((select) =>
      select
        .exists(
          select
            .selectFrom('vault.invitation_link as later')
            .whereRef('later.study_id', '=', 'link.study_id')
            .whereRef('later.invitation_id', '=', 'link.invitation_id')
            .whereRef('later.number', '>', 'link.number')
            .select('later.number'),
        )
        .as('superseded'),
    )
    .executeTakeFirst()
  return (
    row && {
      studyId: row.study_id,
      invitationId: row.invitation_id,
      number: row.number,
      superseded: Boolean(row.superseded),
    }
  )
}

/** What an invitation's page may say without a sign-in: the study, who asks, until when. No laboratory. */
export async function findInvitedStudy(db: Kysely<DB>, studyId: string) {
  return db
    .selectFrom('study')
    .innerJoin('organisation', 'organisation.organisation_id', 'study.organisation_id')
    .innerJoin('study_deadline as deadline', 'deadline.study_id', 'study.study_id')
    .innerJoin('study_state as state', 'state.study_id', 'study.study_id')
    .where('study.study_id', '=', studyId)
    .select([
      'study.study_id as studyId',
      'study.organisation_id as organisationId',
      'study.short_name as shortName',
      'study.title',
      'study.method',
      'study.purpose',
      'organisation.name as organisation',
      'deadline.due_at as dueAt',
      'deadline.zone as zone',
      'state.state',
      sql<Date>`clock_now()`.as('now'),
    ])
    .orderBy('deadline.number', 'desc')
    .orderBy('state.number', 'desc')
    .limit(1)
    .executeTakeFirst()
}

/** Records the answer; undefined when the invitation was answered before. */
export async function insertInvitationAnswer(
  trx: Transaction<DB>,
  {
    studyId,
    invitationId,
    answer,
  }: { studyId: string; invitationId: string; answer: 'accepted' | 'declined' },
): Promise<boolean> {
  const inserted = await trx
    .insertInto('vault.invitation_answer')
    .values({ study_id: studyId, invitation_id: invitationId, answer })
    .onConflict((conflict) => conflict.columns(['study_id', 'invitation_id']).doNothing())
    .returning('answer')
    .executeTakeFirst()
  return inserted !== undefined
}

export async function listCodes(db: Kysely<DB>, studyId: string): Promise<string[]> {
  const rows = await db.selectFrom('participant').select('code').where('study_id', '=', studyId).execute()
  return rows.map((row) => row.code)
}

/** Gives an accepted invitation its code and its first contact. */
export async function insertParticipant(
  trx: Transaction<DB>,
  {
    studyId,
    invitationId,
    code,
    personId,
  }: { studyId: string; invitationId: string; code: string; personId: string },
): Promise<string> {
  const { participant_id } = await trx
    .insertInto('participant')
    .values({ study_id: studyId, code })
    .returning('participant_id')
    .executeTakeFirstOrThrow()
  await trx
    .insertInto('vault.identity')
    .values({ study_id: studyId, participant_id, invitation_id: invitationId })
    .execute()
  await trx
    .insertInto('vault.contact')
    .values({ study_id: studyId, participant_id, person_id: personId })
    .execute()
  return participant_id
}

/** Which laboratory stands behind which code. Every caller writes an audit entry. */
export async function readKey(
  db: Kysely<DB>,
  studyId: string,
): Promise<{ code: string; laboratory: string; invitationId: string }[]> {
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
    .select(['participant.code', 'laboratory.name as laboratory', 'invitation.invitation_id as invitationId'])
    .orderBy('participant.code')
    .execute()
}

/** Everything that names a laboratory of the study: to hold a free text against before it is stored. */
export async function listIdentifyingWords(db: Kysely<DB>, studyId: string): Promise<string[]> {
  const rows = await selectInvitations(db).where('invitation.study_id', '=', studyId).execute()
  return rows
    .flatMap((row) => [row.name, row.city, row.address, row.address.split('@')[1] ?? '', row.contact_name])
    .filter((word) => word.length >= 3)
}
