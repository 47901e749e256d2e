'use server'

import { z } from 'zod'
import { keepSheet } from '@/lib/use-cases/returns/keep-sheet'
import { formAction } from '@/lib/web/form-action'
import { readEntryFields } from '../../entry-names'
import { participationPaths } from '../../participation-paths'

const input = z
  .looseObject({
    studyId: z.uuid(),
    draftVersion: z.coerce.number().int().min(0),
    remark: z.string().max(2000, 'Keep the remark within 2000 characters.'),
    commaIs: z.enum(['decimal', 'thousands']).optional(),
  })
  .transform(({ studyId, draftVersion, remark, commaIs, ...rest }) => ({
    studyId,
    seenVersion: draftVersion,
    remark,
    cells: readEntryFields(rest),
    ...(commaIs ? { commaIs } : {}),
  }))

/** Keeps the sheet and leads to the look at it before it is returned, or back to what has to be mended first. */
export const checkSheetAction = formAction({
  input,
  run: keepSheet,
  then: ({ studyId, problems }) => ({
    go: problems > 0 ? participationPaths.sheetWithProblems(studyId) : participationPaths.check(studyId),
  }),
})
