import { sql, type Kysely, type Transaction } from 'kysely'
import type { DB } from '@/db/tables'

export interface ReceiptRecord {
  readonly returnId: string
  readonly number: number
  readonly receiptNumber: string
  readonly receivedAt: Date
  readonly bodyDigest: string
  readonly source: 'sheet' | 'file'
  readonly uploadId: string | null
  readonly remark: string
}

export interface ReportedRow {
  readonly measurandId: string
  readonly materialId: string
  readonly groups: readonly number[]
  readonly text: string
}

const receiptColumns = [
  'receipt.return_id as returnId',
  'result_return.number',
  'receipt.receipt_number as receiptNumber',
  'receipt.received_at as receivedAt',
  'receipt.body_digest as bodyDigest',
  'receipt.source',
  'receipt.upload_id as uploadId',
  'receipt.remark',
] as const

function selectReceipts(
  db: Kysely<DB>,
  { studyId, participantId }: { studyId: string; participantId: string },
) {
  return db
    .selectFrom('vault.receipt as receipt')
    .innerJoin('result_return', (join) =>
      join
        .onRef('result_return.study_id', '=', 'receipt.study_id')
        .onRef('result_return.return_id', '=', 'receipt.return_id'),
    )
    .where('receipt.study_id', '=', studyId)
    .where('receipt.participant_id', '=', participantId)
    .select(receiptColumns)
    .$narrowType<{ source: 'sheet' | 'file' }>()
}

/** A laboratory's own returns, the latest first. */
export async function listReceipts(
  db: Kysely<DB>,
  place: { studyId: string; participantId: string },
): Promise<ReceiptRecord[]> {
  return selectReceipts(db, place).orderBy('result_return.number', 'desc').execute()
}

export async function findReceiptByKey(
  db: Kysely<DB>,
  { submissionKey, ...place }: { studyId: string; participantId: string; submissionKey: string },
): Promise<ReceiptRecord | undefined> {
  return selectReceipts(db, place).where('receipt.submission_key', '=', submissionKey).executeTakeFirst()
}

export async function insertReturn(
  trx: Transaction<DB>,
  row: {
    studyId: string
    participantId: string
    submissionKey: string
    bodyDigest: string
    receiptNumber: string
    personId: string
    source: 'sheet' | 'file'
    uploadId: string | null
    remark: string
    results: readonly {
      measurandId: string
      materialId: string
      groups: readonly number[]
      value: string
      censored: '<' | '>' | null
      text: string
      cell: string | null
    }[]
  },
): Promise<{ returnId: string; number: number }> {
  const { return_id: returnId, number } = await trx
    .insertInto('result_return')
    .values((values) => ({
      study_id: row.studyId,
      participant_id: row.participantId,
      number: values
        .selectFrom('result_return')
        .select(sql<number>`coalesce(max(number), 0) + 1`.as('number'))
        .where('study_id', '=', row.studyId)
        .where('participant_id', '=', row.participantId),
    }))
    .returning(['return_id', 'number'])
    .executeTakeFirstOrThrow()
  await trx
    .insertInto('vault.receipt')
    .values({
      study_id: row.studyId,
      return_id: returnId,
      participant_id: row.participantId,
      submission_key: row.submissionKey,
      body_digest: row.bodyDigest,
      receipt_number: row.receiptNumber,
      submitted_by: row.personId,
      source: row.source,
      upload_id: row.uploadId,
      remark: row.remark,
    })
    .execute()
  const place = (each: (typeof row.results)[number]) => ({
    study_id: row.studyId,
    return_id: returnId,
    measurand_id: each.measurandId,
    material_id: each.materialId,
    place: [...each.groups],
  })
  // PostgreSQL takes 65,535 parameters in one statement; 5,000 rows of 7 stay below that.
  await trx
    .insertInto('test_result')
    .values(row.results.map((each) => ({ ...place(each), value: each.value, censored: each.censored })))
    .execute()
  await trx
    .insertInto('vault.reported_text')
    .values(row.results.map((each) => ({ ...place(each), text: each.text, source_cell: each.cell })))
    .execute()
  return { returnId, number }
}

/** What a laboratory reported in one of its returns, as it was typed. */
export async function listReportedTexts(
  db: Kysely<DB>,
  { studyId, returnId }: { studyId: string; returnId: string },
): Promise<ReportedRow[]> {
  const rows = await db
    .selectFrom('vault.reported_text')
    .where('study_id', '=', studyId)
    .where('return_id', '=', returnId)
    .select(['measurand_id', 'material_id', 'place', 'text'])
    .execute()
  return rows.map((row) => ({
    measurandId: row.measurand_id,
    materialId: row.material_id,
    groups: row.place,
    text: row.text,
  }))
}

export async function countReturns(
  db: Kysely<DB>,
  studyId: string,
): Promise<{ returned: number; expected: number }> {
  const row = await db
    .selectFrom('participant')
    .leftJoin('result_return', (join) =>
      join
        .onRef('result_return.study_id', '=', 'participant.study_id')
        .onRef('result_return.participant_id', '=', 'participant.participant_id')
        .on('result_return.number', '=', 1),
    )
    .where('participant.study_id', '=', studyId)
    .select((select) => [
      select.fn.count<number>('participant.participant_id').as('expected'),
      select.fn.count<number>('result_return.return_id').as('returned'),
    ])
    .executeTakeFirstOrThrow()
  return row
}

export interface ReturnProgress {
  readonly participantId: string
  readonly code: string
  readonly acceptedAt: Date | null
  readonly draftSavedAt: Date | null
  readonly draftEntries: number
  readonly returnedAt: Date | null
  readonly returns: number
  readonly results: number
  readonly remark: string
  readonly zone: string
  readonly extendedTo: Date | null
  readonly request: { requestId: string; message: string; requestedAt: Date } | null
}

/** How far each laboratory has come, by code: for the coordinator's lanes. */
export async function listReturnProgress(db: Kysely<DB>, studyId: string): Promise<ReturnProgress[]> {
  const rows = await db
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
    .leftJoin('vault.invitation_answer as answer', (join) =>
      join
        .onRef('answer.study_id', '=', 'invitation.study_id')
        .onRef('answer.invitation_id', '=', 'invitation.invitation_id'),
    )
    .leftJoin('vault.draft as draft', (join) =>
      join
        .onRef('draft.study_id', '=', 'participant.study_id')
        .onRef('draft.participant_id', '=', 'participant.participant_id'),
    )
    .leftJoinLateral(
      (from) =>
        from
          .selectFrom('vault.receipt as receipt')
          .innerJoin('result_return as each', (join) =>
            join
              .onRef('each.study_id', '=', 'receipt.study_id')
              .onRef('each.return_id', '=', 'receipt.return_id'),
          )
          .whereRef('receipt.study_id', '=', 'participant.study_id')
          .whereRef('receipt.participant_id', '=', 'participant.participant_id')
          .orderBy('each.number', 'desc')
          .limit(1)
          .select(['receipt.received_at', 'receipt.remark', 'each.number', 'each.return_id'])
          .as('last'),
      (join) => join.onTrue(),
    )
    .leftJoinLateral(
      (from) =>
        from
          .selectFrom('vault.extension as extension')
          .whereRef('extension.study_id', '=', 'participant.study_id')
          .whereRef('extension.participant_id', '=', 'participant.participant_id')
          .select((select) => [
            select.fn.max('extension.due_at').as('due_at'),
            select.fn.max('extension.granted_at').as('granted_at'),
          ])
          .as('extension'),
      (join) => join.onTrue(),
    )
    .leftJoinLateral(
      (from) =>
        from
          .selectFrom('vault.extension_request as request')
          .whereRef('request.study_id', '=', 'participant.study_id')
          .whereRef('request.participant_id', '=', 'participant.participant_id')
          .orderBy('request.requested_at', 'desc')
          .limit(1)
          .select(['request.request_id', 'request.message', 'request.requested_at'])
          .as('request'),
      (join) => join.onTrue(),
    )
    .where('participant.study_id', '=', studyId)
    .orderBy('participant.code')
    .select([
      'participant.participant_id',
      'participant.code',
      'invitation.zone',
      'answer.answered_at',
      'draft.saved_at',
      'last.received_at',
      'last.remark',
      'last.number',
      'extension.due_at',
      'extension.granted_at',
      'request.request_id',
      'request.message',
      'request.requested_at',
      sql<number>`(select count(*) from jsonb_each_text(draft.entries) where value <> '')`.as(
        'draft_entries',
      ),
      sql<number>`(select count(*) from test_result where test_result.study_id = participant.study_id and test_result.return_id = last.return_id)`.as(
        'results',
      ),
    ])
    .execute()
  return rows.map((row) => ({
    participantId: row.participant_id,
    code: row.code,
    acceptedAt: row.answered_at,
    draftSavedAt: row.saved_at,
    draftEntries: row.draft_entries,
    returnedAt: row.received_at,
    returns: row.number ?? 0,
    results: row.results,
    remark: row.remark ?? '',
    zone: row.zone,
    extendedTo: row.due_at,
    request:
      row.request_id &&
      row.message !== null &&
      row.requested_at &&
      !(row.granted_at && row.granted_at > row.requested_at)
        ? { requestId: row.request_id, message: row.message, requestedAt: row.requested_at }
        : null,
  }))
}
