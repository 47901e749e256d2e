import { sql, type Kysely, type Transaction } from 'kysely'
import type { DB } from '@/db/tables'

export interface MailRow {
  readonly mailId: string
  readonly studyId: string | null
  readonly kind: string
  readonly recipient: string
  readonly subjectIds: unknown
}

export type MailOutcome = 'sent' | 'refused' | 'deferred' | 'dropped'

/** The id of the new row, or undefined when one with the same key is there. */
export async function insertMail(
  trx: Transaction<DB>,
  mail: Omit<MailRow, 'mailId'> & { subjectIds: Record<string, string>; dedupeKey: string | null },
): Promise<string | undefined> {
  const made = await trx
    .insertInto('vault.mail')
    .values({
      study_id: mail.studyId,
      kind: mail.kind,
      recipient: mail.recipient,
      subject_ids: JSON.stringify(mail.subjectIds),
      dedupe_key: mail.dedupeKey,
    })
    .onConflict((conflict) => conflict.column('dedupe_key').doNothing())
    .returning('mail_id')
    .executeTakeFirst()
  return made?.mail_id
}

export async function unscopedFindMail(db: Kysely<DB>, mailId: string): Promise<MailRow | undefined> {
  const row = await db
    .selectFrom('vault.mail')
    .select(['mail_id', 'study_id', 'kind', 'recipient', 'subject_ids'])
    .where('mail_id', '=', mailId)
    .executeTakeFirst()
  if (!row) return undefined
  return {
    mailId: row.mail_id,
    studyId: row.study_id,
    kind: row.kind,
    recipient: row.recipient,
    subjectIds: row.subject_ids,
  }
}

/**
 * The number of a new attempt, or undefined when the mail has met its end. Two workers that come to one mail at
 * once draw the same number, and the key lets one of them pass.
 */
export async function insertMailAttempt(db: Kysely<DB>, mailId: string): Promise<number | undefined> {
  const { rows } = await sql<{ number: number }>`
    insert into vault.mail_attempt (mail_id, number)
    select ${mailId}::uuid, coalesce(max(number), 0) + 1 from vault.mail_attempt where mail_id = ${mailId}
    having count(*) filter (where outcome in ('sent', 'refused', 'dropped')) = 0
    on conflict do nothing
    returning number
  `.execute(db)
  return rows[0]?.number
}

export async function finishMailAttempt(
  db: Kysely<DB>,
  {
    mailId,
    number,
    outcome,
    detail,
  }: { mailId: string; number: number; outcome: MailOutcome; detail: string | null },
): Promise<void> {
  await db
    .updateTable('vault.mail_attempt')
    .set({ finished_at: sql<Date>`clock_now()`, outcome, detail })
    .where('mail_id', '=', mailId)
    .where('number', '=', number)
    .execute()
}

export interface StudyMailFacts {
  readonly shortName: string
  readonly title: string
  /** The coordinator who set the study up, to whom an answer goes. */
  readonly coordinatorName: string
  readonly coordinatorAddress: string
  readonly organisationName: string
}

const studyFacts = sql`
  s.short_name as "shortName", s.title, coalesce(c.name, c.email) as "coordinatorName",
  c.email as "coordinatorAddress", o.name as "organisationName"`

const latestDeadline = sql`
  join lateral (select due_at, zone from study_deadline d where d.study_id = s.study_id
    order by number desc limit 1) deadline on true`

export interface InvitationMailFacts extends StudyMailFacts {
  readonly contactName: string
  readonly zone: string
  readonly dueAt: Date
  readonly isAnswered: boolean
  /** The link in force: an earlier one is not worth mailing. */
  readonly latestLink: number
}

export async function unscopedFindInvitationMail(
  db: Kysely<DB>,
  { studyId, invitationId }: { studyId: string; invitationId: string },
): Promise<InvitationMailFacts | undefined> {
  const { rows } = await sql<InvitationMailFacts>`
    select ${studyFacts}, i.contact_name as "contactName", i.zone, deadline.due_at as "dueAt",
      exists (select from vault.invitation_answer a
        where a.study_id = i.study_id and a.invitation_id = i.invitation_id) as "isAnswered",
      (select max(number) from vault.invitation_link l
        where l.study_id = i.study_id and l.invitation_id = i.invitation_id) as "latestLink"
    from vault.invitation i
    join study s on s.study_id = i.study_id
    join organisation o on o.organisation_id = s.organisation_id
    join vault."User" c on c.id = i.invited_by
    ${latestDeadline}
    where i.study_id = ${studyId} and i.invitation_id = ${invitationId}
  `.execute(db)
  return rows[0]
}

export interface ReceiptMailFacts extends StudyMailFacts {
  readonly receiptNumber: string
  readonly receivedAt: Date
  readonly results: number
  readonly zone: string
}

export async function unscopedFindReceiptMail(
  db: Kysely<DB>,
  { studyId, returnId }: { studyId: string; returnId: string },
): Promise<ReceiptMailFacts | undefined> {
  const { rows } = await sql<ReceiptMailFacts>`
    select ${studyFacts}, r.receipt_number as "receiptNumber", r.received_at as "receivedAt", i.zone,
      (select count(*) from test_result t
        where t.study_id = r.study_id and t.return_id = r.return_id)::integer as results
    from vault.receipt r
    join vault.identity k on k.study_id = r.study_id and k.participant_id = r.participant_id
    join vault.invitation i on i.study_id = k.study_id and i.invitation_id = k.invitation_id
    join study s on s.study_id = r.study_id
    join organisation o on o.organisation_id = s.organisation_id
    join vault."User" c on c.id = i.invited_by
    where r.study_id = ${studyId} and r.return_id = ${returnId}
  `.execute(db)
  return rows[0]
}

export interface ExtensionRequestMailFacts extends StudyMailFacts {
  readonly requestedAt: Date
  readonly zone: string
}

/** For the coordinators: that somebody asks, and when. Who asks is read after signing in, not in a mail. */
export async function unscopedFindExtensionRequestMail(
  db: Kysely<DB>,
  { studyId, requestId }: { studyId: string; requestId: string },
): Promise<ExtensionRequestMailFacts | undefined> {
  const { rows } = await sql<ExtensionRequestMailFacts>`
    select ${studyFacts}, e.requested_at as "requestedAt", deadline.zone
    from vault.extension_request e
    join study s on s.study_id = e.study_id
    join organisation o on o.organisation_id = s.organisation_id
    join vault."User" c on c.id = s.created_by
    ${latestDeadline}
    where e.study_id = ${studyId} and e.request_id = ${requestId}
  `.execute(db)
  return rows[0]
}

export interface ExtensionMailFacts extends StudyMailFacts {
  readonly dueAt: Date
  readonly zone: string
}

/** The latest extension of a laboratory: whichever mail comes to be sent, it says what holds. */
export async function unscopedFindExtensionMail(
  db: Kysely<DB>,
  { studyId, participantId }: { studyId: string; participantId: string },
): Promise<ExtensionMailFacts | undefined> {
  const { rows } = await sql<ExtensionMailFacts>`
    select ${studyFacts}, x.due_at as "dueAt", i.zone
    from vault.extension x
    join vault.identity k on k.study_id = x.study_id and k.participant_id = x.participant_id
    join vault.invitation i on i.study_id = k.study_id and i.invitation_id = k.invitation_id
    join study s on s.study_id = x.study_id
    join organisation o on o.organisation_id = s.organisation_id
    join vault."User" c on c.id = x.granted_by
    where x.study_id = ${studyId} and x.participant_id = ${participantId}
    order by x.number desc limit 1
  `.execute(db)
  return rows[0]
}
