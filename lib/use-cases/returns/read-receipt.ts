import { listReceipts, listReportedTexts, type ReceiptRecord, type ReportedRow } from '@/db/queries/returns'
import { findUpload } from '@/db/queries/uploads'
import type { Context } from '@/lib/context'
import { NotFound } from '@/lib/domain/errors'
import { readParticipation, type ParticipationView } from './read-participation'
import { ownParticipation } from './own-participation'

export interface ReceiptView {
  readonly view: ParticipationView
  readonly receipt: ReceiptRecord
  readonly rows: readonly ReportedRow[]
  readonly file: { fileName: string; sha256: string; size: number } | null
}

/** One of a laboratory's own returns, as it was received. */
export async function readReceipt(
  context: Context,
  { studyId, number }: { studyId: string; number: number },
): Promise<ReceiptView> {
  const { participation } = await ownParticipation(context.db, context, { studyId, action: 'return.read' })
  const { participantId } = participation
  const receipt = (await listReceipts(context.db, { studyId, participantId })).find(
    (each) => each.number === number,
  )
  if (!receipt) throw new NotFound('receipt')
  const [view, rows, upload] = await Promise.all([
    readParticipation(context, { studyId }),
    listReportedTexts(context.db, { studyId, returnId: receipt.returnId }),
    receipt.uploadId
      ? findUpload(context.db, { studyId, participantId, uploadId: receipt.uploadId })
      : undefined,
  ])
  return {
    view,
    receipt,
    rows,
    file: upload ? { fileName: upload.fileName, sha256: upload.sha256, size: upload.size } : null,
  }
}
