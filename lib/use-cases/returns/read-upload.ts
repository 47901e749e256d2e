import { findUpload, findUploadCheck, unscopedReadUploadBytes } from '@/db/queries/uploads'
import { isUuid } from '@/db/queries/studies'
import type { Context } from '@/lib/context'
import { NotFound } from '@/lib/domain/errors'
import type { ReturnCheck } from '@/lib/spreadsheet/match-return'
import { ownParticipation } from './own-participation'

export interface UploadView {
  readonly uploadId: string
  readonly fileName: string
  readonly size: number
  readonly sha256: string
  readonly stage: 'waiting' | 'reading' | 'checked' | 'refused'
  readonly refusal: { code: string; message: string } | null
  readonly check: ReturnCheck | null
  readonly decimalMark: 'comma' | 'point' | null
}

/** How far the reading of a laboratory's own file has come, and what it found. */
export async function readUpload(
  context: Context,
  { studyId, uploadId }: { studyId: string; uploadId: string },
): Promise<UploadView> {
  const { participation } = await ownParticipation(context.db, context, { studyId, action: 'return.upload' })
  const upload = isUuid(uploadId)
    ? await findUpload(context.db, { studyId, uploadId, participantId: participation.participantId })
    : undefined
  const check = upload && (await findUploadCheck(context.db, { studyId, uploadId }))
  if (!upload || !check) throw new NotFound('upload')
  return {
    uploadId,
    fileName: upload.fileName,
    size: upload.size,
    sha256: upload.sha256,
    stage: check.outcome ?? (check.startedAt ? 'reading' : 'waiting'),
    refusal: check.outcome === 'refused' ? { code: check.code ?? '', message: check.message ?? '' } : null,
    check: check.outcome === 'checked' ? (check.report as ReturnCheck) : null,
    decimalMark: check.decimalMark,
  }
}

/** The file as the laboratory sent it, for the laboratory itself. */
export async function downloadUpload(
  context: Context,
  { studyId, uploadId }: { studyId: string; uploadId: string },
): Promise<{ fileName: string; bytes: Buffer }> {
  await readUpload(context, { studyId, uploadId })
  const file = await unscopedReadUploadBytes(context.db, { studyId, uploadId })
  if (!file) throw new NotFound('upload')
  return { fileName: file.fileName, bytes: file.bytes }
}
