import { saveDraft } from '@/lib/use-cases/returns/save-draft'
import { routeHandler } from '@/lib/web/route-handler'
import { readJsonBody } from '../../read-bounded-body'
import { schemas } from '../../schemas'

/** Keeps the draft of a sheet. A draft written elsewhere since is given back with 409, and not overwritten. */
export const PUT = routeHandler({
  params: schemas.studyParams,
  run: async (context, { request, params: { studyId } }) => {
    const draft = schemas.draft.parse(await readJsonBody(request))
    const outcome = await saveDraft(context, { studyId, ...draft })
    return Response.json(outcome, { status: outcome.outcome === 'kept' ? 200 : 409 })
  },
})
