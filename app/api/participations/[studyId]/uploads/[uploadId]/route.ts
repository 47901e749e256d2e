import { readUpload } from '@/lib/use-cases/returns/read-upload'
import { routeHandler } from '@/lib/web/route-handler'
import { schemas } from '../../../schemas'

/** How far the reading of a file has come. */
export const GET = routeHandler({
  params: schemas.uploadParams,
  run: async (context, { params }) => {
    const { check, ...upload } = await readUpload(context, params)
    const counts = check && {
      values: check.values.length,
      problems: check.problems.length,
      questions: check.questions.length,
      missing: check.missing.length,
    }
    return schemas.uploadState.parse({ ...upload, counts })
  },
})
