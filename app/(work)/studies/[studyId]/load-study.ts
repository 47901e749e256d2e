import { notFound } from 'next/navigation'
import { cache } from 'react'
import { NotFound } from '@/lib/domain/errors'
import { readStudy } from '@/lib/use-cases/studies/read-study'
import { requestContext, requireActor } from '@/lib/web/request-context'

/** What every page of a study begins with: who asks, and the study; read once a request. */
export const loadStudy = cache(async (studyId: string) => {
  const actor = await requireActor()
  const context = await requestContext()
  const view = await orNotFound(readStudy(context, { studyId }))
  return { actor, context, view }
})

/** Out of sight and absent are one page. */
export async function orNotFound<Result>(reading: Promise<Result>): Promise<Result> {
  try {
    return await reading
  } catch (error) {
    if (error instanceof NotFound) notFound()
    throw error
  }
}
