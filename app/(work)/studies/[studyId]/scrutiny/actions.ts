'use server'

import { z } from 'zod'
import { excludeCell, takeCellBack } from '@/lib/use-cases/analyses/exclude-cell'
import { requestAnalysis } from '@/lib/use-cases/analyses/request-analysis'
import { formAction } from '@/lib/web/form-action'

const decision = z.object({
  studyId: z.string(),
  code: z.string().trim().min(1, 'Choose a laboratory.'),
  measurandId: z.string(),
  materialId: z.string().min(1, 'Choose a material.'),
  reason: z.string(),
})

/** Has the statistics computed from the returns as they stand. */
export const requestAnalysisAction = formAction({
  input: z.object({ studyId: z.string() }),
  run: async (context, { studyId }) => ({ studyId, ...(await requestAnalysis(context, { studyId })) }),
  then: ({ studyId }) => ({ refresh: `/studies/${studyId}`, message: 'Computing has begun.' }),
})

/** Sets a cell aside, with its reason. */
export const excludeCellAction = formAction({
  input: decision,
  run: async (context, input) => {
    await excludeCell(context, input)
    return input
  },
  then: ({ studyId, code }) => ({
    refresh: `/studies/${studyId}`,
    message: `A cell of ${code} is set aside; the statistics are being computed again.`,
  }),
})

/** Takes a cell back in, with its reason. */
export const takeCellBackAction = formAction({
  input: decision,
  run: async (context, input) => {
    await takeCellBack(context, input)
    return input
  },
  then: ({ studyId, code }) => ({
    refresh: `/studies/${studyId}`,
    message: `The cell of ${code} counts again; the statistics are being computed again.`,
  }),
})
