'use server'

import { z } from 'zod'
import { studyPlan } from '@/lib/domain/study-plan'
import { planStudy } from '@/lib/use-cases/studies/plan-study'
import { setDeadline } from '@/lib/use-cases/studies/set-deadline'
import { formAction } from '@/lib/web/form-action'
import { paths } from '@/lib/web/paths'
import { deadlineInput } from '../../forms/deadline-input'

/** Changes the plan of a draft. */
export const planStudyAction = formAction({
  input: z
    .object({ studyId: z.uuid(), localTime: deadlineInput.localTime, zone: deadlineInput.zone })
    .and(studyPlan),
  run: (context, { studyId, ...plan }) => planStudy(context, { studyId, plan }),
  then: ({ studyId }) => ({
    refresh: paths.study(studyId),
    message: 'The plan is saved. Nobody has been written to.',
  }),
})

/** Moves the deadline of an open study; the earlier one stays in the trail. */
export const setDeadlineAction = formAction({
  input: z.object({ studyId: z.uuid(), ...deadlineInput }),
  run: async (context, input) => {
    await setDeadline(context, input)
    return input
  },
  then: ({ studyId }) => ({
    refresh: paths.study(studyId),
    message: 'The deadline is moved. Every laboratory sees the new one in its own time.',
  }),
})
