import type { Context } from '@/lib/context'
import { Refusal } from '@/lib/domain/errors'
import { readUpload } from './read-upload'
import { submitReturn, type SubmissionOutcome } from './submit-return'

/**
 * Returns what a checked file holds, as previewed. The upload's own id is the key: confirming twice is one return.
 * The checked texts already carry the laboratory's answer on its decimal mark, so that none is stated again.
 * @throws {Refusal} `file-has-problems` while a problem or a question is open
 */
export async function submitUpload(
  context: Context,
  { studyId, uploadId, remark }: { studyId: string; uploadId: string; remark: string },
): Promise<SubmissionOutcome> {
  const { check } = await readUpload(context, { studyId, uploadId })
  if (!check || check.problems.length > 0 || check.questions.length > 0)
    throw new Refusal(
      'file-has-problems',
      'The file still has problems or open questions. Mend them in the workbook and send it again.',
    )
  return submitReturn(context, {
    studyId,
    submissionKey: uploadId,
    entries: Object.fromEntries(check.values.map(({ key, text }) => [key, text])),
    upload: {
      uploadId,
      cells: Object.fromEntries(check.values.map(({ key, cell, typed }) => [key, { cell, typed }])),
    },
    remark,
  })
}
