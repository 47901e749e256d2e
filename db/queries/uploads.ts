import { sql, type Kysely, type Transaction } from 'kysely'
import type { DB } from '@/db/tables'

export interface UploadCheckRecord {
  readonly number: number
  readonly decimalMark: 'comma' | 'point' | null
  readonly startedAt: Date | null
  readonly finishedAt: Date | null
  readonly outcome: 'checked' | 'refused' | null
  readonly code: string | null
  readonly message: string | null
  readonly report: unknown
}

interface UploadPlace {
  readonly studyId: string
  readonly uploadId: string
}

export async function insertUpload(
  trx: Transaction<DB>,
  row: {
    studyId: string
    participantId: string
    fileName: string
    bytes: Buffer
    sha256: string
    personId: string
  },
): Promise<string> {
  const { upload_id } = await trx
    .insertInto('vault.upload')
    .values({
      study_id: row.studyId,
      participant_id: row.participantId,
      file_name: row.fileName,
      bytes: row.bytes,
      sha256: row.sha256,
      uploaded_by: row.personId,
    })
    .returning('upload_id')
    .executeTakeFirstOrThrow()
  return upload_id
}

/** The record of an upload without its bytes, within one laboratory. */
export async function findUpload(
  db: Kysely<DB>,
  { studyId, uploadId, participantId }: UploadPlace & { participantId: string },
) {
  return db
    .selectFrom('vault.upload')
    .where('study_id', '=', studyId)
    .where('upload_id', '=', uploadId)
    .where('participant_id', '=', participantId)
    .select([
      'upload_id as uploadId',
      'file_name as fileName',
      'sha256',
      'uploaded_at as uploadedAt',
      sql<number>`octet_length(bytes)`.as('size'),
    ])
    .executeTakeFirst()
}

/** The original bytes, for the job that reads them and for the laboratory itself. */
export async function unscopedReadUploadBytes(db: Kysely<DB>, { studyId, uploadId }: UploadPlace) {
  return db
    .selectFrom('vault.upload')
    .where('study_id', '=', studyId)
    .where('upload_id', '=', uploadId)
    .select(['file_name as fileName', 'bytes', 'participant_id as participantId'])
    .executeTakeFirst()
}

export async function countRecentUploads(
  db: Kysely<DB>,
  { studyId, participantId }: { studyId: string; participantId: string },
): Promise<number> {
  const { count } = await db
    .selectFrom('vault.upload')
    .where('study_id', '=', studyId)
    .where('participant_id', '=', participantId)
    .where('uploaded_at', '>', sql<Date>`clock_now() - interval '1 hour'`)
    .select((select) => select.fn.countAll<number>().as('count'))
    .executeTakeFirstOrThrow()
  return count
}

export async function insertUploadCheck(
  trx: Transaction<DB>,
  { studyId, uploadId, decimalMark }: UploadPlace & { decimalMark: 'comma' | 'point' | null },
): Promise<number> {
  const { number } = await trx
    .insertInto('vault.upload_check')
    .values((values) => ({
      study_id: studyId,
      upload_id: uploadId,
      number: values
        .selectFrom('vault.upload_check')
        .select(sql<number>`coalesce(max(number), 0) + 1`.as('number'))
        .where('study_id', '=', studyId)
        .where('upload_id', '=', uploadId),
      decimal_mark: decimalMark,
    }))
    .returning('number')
    .executeTakeFirstOrThrow()
  return number
}

/** The latest check of an upload. */
export async function findUploadCheck(
  db: Kysely<DB>,
  { studyId, uploadId, number }: UploadPlace & { number?: number },
): Promise<UploadCheckRecord | undefined> {
  return db
    .selectFrom('vault.upload_check')
    .where('study_id', '=', studyId)
    .where('upload_id', '=', uploadId)
    .$if(number !== undefined, (query) => query.where('number', '=', number ?? 0))
    .orderBy('number', 'desc')
    .select([
      'number',
      'decimal_mark as decimalMark',
      'started_at as startedAt',
      'finished_at as finishedAt',
      'outcome',
      'code',
      'message',
      'report',
    ])
    .$narrowType<{ decimalMark: 'comma' | 'point' | null; outcome: 'checked' | 'refused' | null }>()
    .executeTakeFirst()
}

export async function markCheckStarted(
  db: Kysely<DB>,
  { studyId, uploadId, number }: UploadPlace & { number: number },
): Promise<void> {
  await db
    .updateTable('vault.upload_check')
    .set({ started_at: sql`clock_now()` })
    .where('study_id', '=', studyId)
    .where('upload_id', '=', uploadId)
    .where('number', '=', number)
    .execute()
}

export async function finishUploadCheck(
  db: Kysely<DB>,
  check: UploadPlace & {
    number: number
    outcome: 'checked' | 'refused'
    code: string | null
    message: string | null
    report: unknown
  },
): Promise<void> {
  await db
    .updateTable('vault.upload_check')
    .set({
      finished_at: sql`clock_now()`,
      outcome: check.outcome,
      code: check.code,
      message: check.message,
      report: check.report === null ? null : JSON.stringify(check.report),
    })
    .where('study_id', '=', check.studyId)
    .where('upload_id', '=', check.uploadId)
    .where('number', '=', check.number)
    .where('finished_at', 'is', null)
    .execute()
}
