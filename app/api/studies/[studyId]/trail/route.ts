import { readTrail } from '@/lib/use-cases/trail/read-trail'
import { routeHandler } from '@/lib/web/route-handler'
import { studyParams } from '../returns/schema'
import { trailAnswer } from './schema'

/** A study's audit trail as a file, with everything its digests are made of. */
export const GET = routeHandler({
  params: studyParams,
  run: async (context, { params }) => {
    const { study, entries, verdict, head } = await readTrail(context, params)
    const answer = trailAnswer.parse({ studyId: study.studyId, head, verdict, entries })
    const name = `${study.shortName.replaceAll(/[^A-Za-z0-9-]+/g, '-')}-trail.json`
    return new Response(JSON.stringify(answer, null, 2), {
      headers: {
        'Content-Type': 'application/json',
        'Content-Disposition': `attachment; filename="${name}"`,
      },
    })
  },
})
