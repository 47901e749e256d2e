'use server'

import { z } from 'zod'
import { sendToReview, takeBackFromReview } from '@/lib/use-cases/reviews/send-to-review'
import { formAction } from '@/lib/web/form-action'
import { paths } from '@/lib/web/paths'

/** Puts a scrutinised study before its committee. */
export const sendToReviewAction = formAction({
  input: z.object({ studyId: z.string() }),
  run: async (context, input) => {
    await sendToReview(context, input)
    return input
  },
  then: ({ studyId }) => ({
    refresh: paths.study(studyId),
    message: 'The committee can read the study now.',
  }),
})

/** Takes a study back from its committee. */
export const takeBackFromReviewAction = formAction({
  input: z.object({ studyId: z.string(), reason: z.string() }),
  run: async (context, input) => {
    await takeBackFromReview(context, input)
    return input
  },
  then: ({ studyId }) => ({ refresh: paths.study(studyId), message: 'The study is back at scrutiny.' }),
})
