import { lanesCsv } from '@/lib/domain/lanes-csv'
import { watchReturns } from '@/lib/use-cases/returns/watch-returns'
import { routeHandler } from '@/lib/web/route-handler'
import { studyParams } from '../schema'
import { toReturnsAnswer } from '../to-returns-answer'

/** The lanes of a round by code, as a file. */
export const GET = routeHandler({
  params: studyParams,
  run: async (context, { params }) => {
    const view = await watchReturns(context, params)
    const name = `${view.study.shortName.replaceAll(/[^A-Za-z0-9-]+/g, '-')}-returns.csv`
    return new Response(lanesCsv(toReturnsAnswer(view)), {
      headers: {
        'Content-Type': 'text/csv; charset=utf-8',
        'Content-Disposition': `attachment; filename="${name}"`,
      },
    })
  },
})
