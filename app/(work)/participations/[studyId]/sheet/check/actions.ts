'use server'

import { z } from 'zod'
import { submitSheet } from '@/lib/use-cases/returns/submit-sheet'
import { formAction } from '@/lib/web/form-action'
import { paths } from '@/lib/web/paths'
import { participationPaths } from '../../../participation-paths'

const checkedTexts = z.array(z.string().max(200)).max(5000)

const input = z.object({
  studyId: z.uuid(),
  submissionKey: z.string().min(1).max(100),
  checked: z.string().transform((text, context) => {
    const parsed = checkedTexts.safeParse(readJson(text))
    if (parsed.success) return parsed.data
    context.addIssue({ code: 'custom', message: 'Open this page afresh and check again.' })
    return z.NEVER
  }),
  remark: z.string(),
})

/** Returns what the page showed, once: the same key and content is the same return, however often it arrives. */
export const submitSheetAction = formAction({
  input,
  run: submitSheet,
  then: ({ studyId, outcome }) => ({
    go:
      outcome.outcome === 'received'
        ? paths.receipt(studyId, outcome.number)
        : participationPaths.sheetWithProblems(studyId),
  }),
})

function readJson(text: string): unknown {
  try {
    return JSON.parse(text)
  } catch {
    return null
  }
}
