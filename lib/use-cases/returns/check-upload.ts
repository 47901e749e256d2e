import {
  findUploadCheck,
  finishUploadCheck,
  markCheckStarted,
  unscopedReadUploadBytes,
} from '@/db/queries/uploads'
import { findInvitedStudy } from '@/db/queries/laboratories'
import { readLayout } from '@/db/queries/studies'
import type { AnonymousContext } from '@/lib/context'
import { checkUpload } from '@/lib/spreadsheet/check-upload'
import { toReturnLayout } from './return-layout'

/** Reads one uploaded file through and keeps what was found; harmless when run twice. */
export async function checkUploadedFile(
  context: AnonymousContext,
  { studyId, uploadId, number }: { studyId: string; uploadId: string; number: number },
): Promise<void> {
  const place = { studyId, uploadId, number }
  const check = await findUploadCheck(context.db, place)
  const upload = await unscopedReadUploadBytes(context.db, place)
  const study = await findInvitedStudy(context.db, studyId)
  if (!check || check.finishedAt || !upload || !study) return
  await markCheckStarted(context.db, place)
  const layout = toReturnLayout(study.shortName, await readLayout(context.db, studyId))
  const result = await checkUpload({
    bytes: upload.bytes,
    fileName: upload.fileName,
    layout,
    ...(check.decimalMark ? { decimalMark: check.decimalMark } : {}),
  })
  if (result.outcome === 'refused')
    await finishUploadCheck(context.db, {
      ...place,
      outcome: 'refused',
      code: result.code,
      message: result.message,
      report: null,
    })
  else
    await finishUploadCheck(context.db, {
      ...place,
      outcome: 'checked',
      code: null,
      message: null,
      report: result.check,
    })
}
