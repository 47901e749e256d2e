'use server'

import { z } from 'zod'
import { proposePublication } from '@/lib/use-cases/publications/propose-publication'
import { withdrawProposal } from '@/lib/use-cases/publications/withdraw-proposal'
import { formAction } from '@/lib/web/form-action'
import { paths } from '@/lib/web/paths'

/** Freezes what would be published, for a second person to confirm. */
export const proposePublicationAction = formAction({
  input: z.object({ studyId: z.string() }),
  run: async (context, input) => {
    await proposePublication(context, input)
    return input
  },
  then: ({ studyId }) => ({
    refresh: paths.study(studyId),
    message: 'Proposed. A second person confirms it.',
  }),
})

/** Withdraws a standing proposal. */
export const withdrawProposalAction = formAction({
  input: z.object({ studyId: z.string(), reason: z.string() }),
  run: async (context, input) => {
    await withdrawProposal(context, input)
    return input
  },
  then: ({ studyId }) => ({ refresh: paths.study(studyId), message: 'The proposal is withdrawn.' }),
})
