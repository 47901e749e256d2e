'use server'

import { z } from 'zod'
import { confirmPublication } from '@/lib/use-cases/publications/confirm-publication'
import { formAction } from '@/lib/web/form-action'
import { paths } from '@/lib/web/paths'

/** Publishes what another person proposed. */
export const confirmPublicationAction = formAction({
  input: z.object({ studyId: z.string(), digest: z.string() }),
  run: confirmPublication,
  then: ({ slug }) => ({ go: paths.publication(slug) }),
})
