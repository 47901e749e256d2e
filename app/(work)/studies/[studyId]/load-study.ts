import { cache } from 'react'
import { readStudy } from '@/lib/use-cases/studies/read-study'
import { orNotFound } from '@/lib/web/or-not-found'
import { requestContext, requireActor } from '@/lib/web/request-context'

/** What every page of a study begins with: who asks, and the study; read once a request. */
export const loadStudy = cache(async (studyId: string) => {
  const actor = await requireActor()
  const context = await requestContext()
  const view = await orNotFound(readStudy(context, { studyId }))
  return { actor, context, view }
})
