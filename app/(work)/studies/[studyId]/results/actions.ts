'use server'

import { z } from 'zod'
import { grantExtension } from '@/lib/use-cases/laboratories/grant-extension'
import { closeStudy } from '@/lib/use-cases/studies/close-study'
import { reopenStudy } from '@/lib/use-cases/studies/reopen-study'
import { formAction } from '@/lib/web/form-action'
import { paths } from '@/lib/web/paths'
import { deadlineInput } from '../../forms/deadline-input'

const study = { studyId: z.uuid() }
const reason = z.string().trim().max(1000, 'Keep the reason within 1000 characters.')

/** Gives one laboratory more time; it is known here by its code alone. */
export const grantExtensionAction = formAction({
  input: z.object({
    ...study,
    code: z.string().max(10),
    localTime: deadlineInput.localTime,
    choice: deadlineInput.choice,
    reason,
  }),
  run: async (context, input) => {
    await grantExtension(context, input)
    return input
  },
  then: ({ studyId, code }) => ({
    refresh: paths.station(studyId, 'results'),
    go: `${paths.station(studyId, 'results')}?extended=${encodeURIComponent(code)}`,
  }),
})

/** Closes the study for returns; before the deadline with a reason. */
export const closeStudyAction = formAction({
  input: z.object({ ...study, reason: reason.default('') }),
  run: async (context, input) => {
    await closeStudy(context, input)
    return input
  },
  then: ({ studyId }) => ({
    refresh: paths.study(studyId),
    go: `${paths.station(studyId, 'results')}?done=closed`,
  }),
})

/** Opens a closed study for returns again, until a new deadline. */
export const reopenStudyAction = formAction({
  input: z.object({ ...study, ...deadlineInput, reason }),
  run: async (context, input) => {
    await reopenStudy(context, input)
    return input
  },
  then: ({ studyId }) => ({
    refresh: paths.study(studyId),
    go: `${paths.station(studyId, 'results')}?done=reopened`,
  }),
})
