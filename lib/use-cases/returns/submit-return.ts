import { createHash } from 'node:crypto'
import type { Transaction } from 'kysely'
import { readClock } from '@/db/queries/clock'
import { deleteDraft, listContactAddresses } from '@/db/queries/participations'
import { findReceiptByKey, insertReturn } from '@/db/queries/returns'
import { readLayout } from '@/db/queries/studies'
import { findUpload, findUploadCheck } from '@/db/queries/uploads'
import type { DB } from '@/db/tables'
import type { Context } from '@/lib/context'
import { canonicalJson } from '@/lib/domain/audit-entry'
import { NotFound, Refusal } from '@/lib/domain/errors'
import type { DecimalMark } from '@/lib/domain/reported-value'
import { showTime } from '@/lib/domain/show-time'
import { describeState } from '@/lib/domain/study-states'
import { queueMail } from '@/lib/mail/queue-mail'
import { placeKey } from '@/lib/spreadsheet/layout'
import { recordAudit } from '../record-audit'
import { ownDeadline, ownParticipation, type OwnParticipation } from './own-participation'
import { readEntries, type EntryProblem, type ReadEntries } from './read-entries'
import { toReturnLayout } from './return-layout'

export interface Submission {
  readonly studyId: string
  /** Made once per form or upload: the same key and the same content is the same return, however often it arrives. */
  readonly submissionKey: string
  readonly entries: Readonly<Record<string, string>>
  readonly decimalMark?: DecimalMark
  /** The file the entries were read from, with the cell and the letters of each. */
  readonly upload?: { uploadId: string; cells: Readonly<Record<string, { cell: string; typed: string }>> }
  readonly remark: string
}

export type SubmissionOutcome =
  | { outcome: 'received'; number: number; receiptNumber: string; receivedAt: Date; repeated: boolean }
  | { outcome: 'problems'; problems: readonly EntryProblem[] }

const attempts = 5

/**
 * Stores a laboratory's results as its next return, once. Whether it is in time is decided by the database's
 * clock, read while the study's row is held, so that closing and returning never cross.
 * @throws {Refusal} `after-deadline`, `not-open`, `nothing-entered`, `gaps-unexplained`, `key-reused`
 */
export async function submitReturn(context: Context, submission: Submission): Promise<SubmissionOutcome> {
  for (let attempt = 1; ; attempt += 1) {
    try {
      return await context.db.transaction().execute((trx) => storeReturn(trx, context, submission))
    } catch (error) {
      // The same return arrived at the same moment and won; the next try finds it.
      if (attempt >= attempts || !isCollision(error)) throw error
    }
  }
}

function isCollision(error: unknown): boolean {
  return (
    error instanceof Error &&
    'constraint' in error &&
    ['receipt_key_unique', 'result_return_number_unique', 'receipt_number_unique'].includes(
      String(error.constraint),
    )
  )
}

async function storeReturn(
  trx: Transaction<DB>,
  context: Context,
  submission: Submission,
): Promise<SubmissionOutcome> {
  const { studyId, submissionKey } = submission
  const own = await ownParticipation(trx, context, { studyId, action: 'return.submit', lock: 'share' })
  const { participantId } = own.participation
  const bodyDigest = digestOf(submission)
  const earlier = await findReceiptByKey(trx, { studyId, participantId, submissionKey })
  if (earlier) {
    if (earlier.bodyDigest !== bodyDigest)
      throw new Refusal(
        'key-reused',
        `This form was already returned with other values, as receipt ${earlier.receiptNumber}. Open the sheet afresh to replace that return.`,
      )
    return {
      outcome: 'received',
      number: earlier.number,
      receiptNumber: earlier.receiptNumber,
      receivedAt: earlier.receivedAt,
      repeated: true,
    }
  }
  await requireInTime(trx, own)
  if (submission.upload)
    await requireOwnUpload(trx, { studyId, participantId, uploadId: submission.upload.uploadId })
  const layout = toReturnLayout(own.study.shortName, await readLayout(trx, studyId))
  const read = readEntries(layout, submission.entries, submission.decimalMark)
  if (read.problems.length > 0) return { outcome: 'problems', problems: read.problems }
  requireComplete(read, submission.remark)

  const receiptNumber = drawReceiptNumber(context)
  const { returnId, number } = await insertReturn(trx, {
    studyId,
    participantId,
    submissionKey,
    bodyDigest,
    receiptNumber,
    personId: context.actor.personId,
    source: submission.upload ? 'file' : 'sheet',
    uploadId: submission.upload?.uploadId ?? null,
    remark: submission.remark.trim(),
    results: read.results.map((each) => {
      const source = submission.upload?.cells[placeKey(each.place)]
      return { ...each, ...each.place, text: source?.typed ?? each.text, cell: source?.cell ?? null }
    }),
  })
  await deleteDraft(trx, { studyId, participantId })
  for (const { address, personId } of await listContactAddresses(trx, { studyId, participantId })) {
    await queueMail(trx, context.jobs, {
      kind: 'receipt',
      studyId,
      recipient: address,
      ids: { studyId, returnId, participantId },
      dedupeKey: `receipt.${returnId}.${personId}`,
    })
  }
  const receipt = await findReceiptByKey(trx, { studyId, participantId, submissionKey })
  if (!receipt) throw new Error('a return just stored was not found')
  // Last, because from here on every other change of the study waits for its chain.
  await recordAudit(trx, {
    actor: context.actor,
    role: own.role,
    studyId,
    fact: {
      action: 'return.submitted',
      version: 1,
      participantId,
      returnId,
      number,
      results: read.results.length,
      bodyDigest,
    },
  })
  return { outcome: 'received', number, receiptNumber, receivedAt: receipt.receivedAt, repeated: false }
}

async function requireInTime(trx: Transaction<DB>, own: OwnParticipation): Promise<void> {
  if (own.study.state !== 'open')
    throw new Refusal(
      'not-open',
      `The study ${describeState(own.study.state)}. Nothing was stored; what you entered is still here. Ask the coordinator if your results should still count.`,
    )
  const dueAt = ownDeadline(own)
  const now = await readClock(trx)
  if (now <= dueAt) return
  const shown = showTime(dueAt, own.participation.zone)
  throw new Refusal(
    'after-deadline',
    `The deadline passed on ${shown.text} in ${shown.zoneText}. Nothing was stored; what you entered is still here. You can ask the coordinator for more time.`,
  )
}

async function requireOwnUpload(
  trx: Transaction<DB>,
  place: { studyId: string; participantId: string; uploadId: string },
): Promise<void> {
  const upload = await findUpload(trx, place)
  const check = upload && (await findUploadCheck(trx, place))
  if (!check) throw new NotFound('upload')
  if (check.outcome !== 'checked')
    throw new Refusal(
      'not-checked',
      'This file has not been read through yet. Wait for the preview, then confirm.',
    )
}

function requireComplete(read: ReadEntries, remark: string): void {
  if (read.results.length === 0)
    throw new Refusal('nothing-entered', 'No result was entered, so there is nothing to return.')
  if (remark.length > 2000)
    throw new Refusal('remark-too-long', 'Keep the remark within 2000 characters.', 'remark')
  if (read.missing.length > 0 && remark.trim().length < 10)
    throw new Refusal(
      'gaps-unexplained',
      `${read.missing.length} of ${read.missing.length + read.results.length} results are missing. Say why in the remark, in a sentence, and return again.`,
      'remark',
    )
}

function digestOf({ entries, decimalMark, upload, remark }: Submission): string {
  const typed = Object.fromEntries(Object.entries(entries).filter(([, text]) => text.trim() !== ''))
  return createHash('sha256')
    .update(
      canonicalJson({
        entries: typed,
        decimalMark: decimalMark ?? null,
        uploadId: upload?.uploadId ?? null,
        remark: remark.trim(),
      }),
    )
    .digest('hex')
}

/** Drawn, not counted: a running number would tell one laboratory how many returned before it. */
function drawReceiptNumber({ random }: Context): string {
  const signs = 'BCDFGHJKLMNPQRSTVWXZ23456789'
  const draw = (length: number) =>
    Array.from({ length }, () => signs.charAt(random.below(signs.length))).join('')
  return `${draw(4)}-${draw(4)}-${draw(4)}`
}
