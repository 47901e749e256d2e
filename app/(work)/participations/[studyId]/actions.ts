'use server'

import { z } from 'zod'
import { requestExtension } from '@/lib/use-cases/laboratories/request-extension'
import { formAction } from '@/lib/web/form-action'

/** Sends the laboratory's wish for more time to the coordinators. */
export const requestExtensionAction = formAction({
  input: z.object({ studyId: z.uuid(), message: z.string() }),
  run: requestExtension,
  then: () => ({ message: 'Sent to the coordinator. The answer comes by mail.' }),
})
