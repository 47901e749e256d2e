'use server'

import { z } from 'zod'
import { studyPlan } from '@/lib/domain/study-plan'
import { createStudy } from '@/lib/use-cases/studies/create-study'
import { formAction } from '@/lib/web/form-action'
import { paths } from '@/lib/web/paths'
import { deadlineInput } from '../forms/deadline-input'

/** Opens a new study as a draft; nobody is written to. */
export const createStudyAction = formAction({
  input: z
    .object({ organisationId: z.uuid(), localTime: deadlineInput.localTime, zone: deadlineInput.zone })
    .and(studyPlan),
  run: (context, { organisationId, ...plan }) => createStudy(context, { organisationId, plan }),
  then: ({ studyId }) => ({ refresh: paths.studies(), go: paths.station(studyId, 'laboratories') }),
})
