'use server'

import { z } from 'zod'
import { recheckUpload } from '@/lib/use-cases/returns/receive-upload'
import { submitUpload } from '@/lib/use-cases/returns/submit-upload'
import { formAction } from '@/lib/web/form-action'
import { paths } from '@/lib/web/paths'
import { participationPaths } from '../../../participation-paths'

const place = z.object({ studyId: z.uuid(), uploadId: z.uuid() })

/** Returns what the file holds, as it was shown. The upload itself is the key: twice is once. */
export const submitUploadAction = formAction({
  input: place.extend({ remark: z.string() }),
  run: async (context, input) => ({ ...input, outcome: await submitUpload(context, input) }),
  then: ({ studyId, uploadId, outcome }) => ({
    go:
      outcome.outcome === 'received'
        ? paths.receipt(studyId, outcome.number)
        : participationPaths.upload(studyId, uploadId),
  }),
})

/** Has the file read again with its decimal mark known. */
export const recheckUploadAction = formAction({
  input: place.extend({ decimalMark: z.enum(['comma', 'point']) }),
  run: async (context, input) => {
    await recheckUpload(context, input)
    return input
  },
  then: ({ studyId, uploadId }) => ({
    refresh: participationPaths.upload(studyId, uploadId),
    go: participationPaths.upload(studyId, uploadId),
  }),
})
