import { createHash } from 'node:crypto'
import { countRecentUploads, findUpload, insertUpload, insertUploadCheck } from '@/db/queries/uploads'
import type { Context } from '@/lib/context'
import { NotFound, Refusal } from '@/lib/domain/errors'
import { workbookLimits } from '@/lib/spreadsheet/workbook'
import { recordAudit } from '../record-audit'
import { ownParticipation } from './own-participation'

/** 5 MB as the page says it, and no byte more than the reader takes. */
export const largestUpload = workbookLimits.packedBytes
const uploadsAnHour = 30

/** Keeps an uploaded file as it came and queues its reading; nothing in it counts as a result yet. */
export async function receiveUpload(
  context: Context,
  { studyId, fileName, bytes }: { studyId: string; fileName: string; bytes: Buffer },
): Promise<{ uploadId: string; sha256: string }> {
  if (bytes.length === 0)
    throw new Refusal('file-empty', 'The file is empty. Save the workbook and choose it again.', 'file')
  if (bytes.length > largestUpload)
    throw new Refusal(
      'file-too-large',
      'The file is larger than 5 MB. Send the results alone, without pictures or other sheets.',
      'file',
    )
  const sha256 = createHash('sha256').update(bytes).digest('hex')
  return context.db.transaction().execute(async (trx) => {
    const { participation, role } = await ownParticipation(trx, context, { studyId, action: 'return.upload' })
    const { participantId } = participation
    if ((await countRecentUploads(trx, { studyId, participantId })) >= uploadsAnHour)
      throw new Refusal(
        'too-many-files',
        'Thirty files came within an hour. Wait a little, or enter the results on screen.',
        'file',
      )
    const uploadId = await insertUpload(trx, {
      studyId,
      participantId,
      fileName: nameOf(fileName),
      bytes,
      sha256,
      personId: context.actor.personId,
    })
    const number = await insertUploadCheck(trx, { studyId, uploadId, decimalMark: null })
    await recordAudit(trx, {
      actor: context.actor,
      role,
      studyId,
      fact: { action: 'upload.received', version: 1, participantId, uploadId, sha256 },
    })
    await context.jobs.enqueue(trx, 'upload.check', { studyId, uploadId, number })
    return { uploadId, sha256 }
  })
}

/** Has a file read again after the laboratory said which mark its decimals carry. */
export async function recheckUpload(
  context: Context,
  { studyId, uploadId, decimalMark }: { studyId: string; uploadId: string; decimalMark: 'comma' | 'point' },
): Promise<void> {
  await context.db.transaction().execute(async (trx) => {
    const { participation } = await ownParticipation(trx, context, { studyId, action: 'return.upload' })
    if (!(await findUpload(trx, { studyId, uploadId, participantId: participation.participantId })))
      throw new NotFound('upload')
    const number = await insertUploadCheck(trx, { studyId, uploadId, decimalMark })
    await context.jobs.enqueue(trx, 'upload.check', { studyId, uploadId, number })
  })
}

/** The last part of whatever path the browser sent, without control characters. */
function nameOf(fileName: string): string {
  const name = (fileName.split(/[\\/]/).at(-1) ?? '').replace(/\p{Cc}|\p{Cf}/gu, '').trim()
  return (name || 'results').slice(0, 200)
}
