import { watchReturns } from '@/lib/use-cases/returns/watch-returns'
import { routeHandler } from '@/lib/web/route-handler'
import { returnsAnswer, studyParams } from './schema'
import { toReturnsAnswer } from './to-returns-answer'

/** Who has returned and who is late, for the page that watches a round. */
export const GET = routeHandler({
  params: studyParams,
  run: async (context, { params }) =>
    returnsAnswer.parse(toReturnsAnswer(await watchReturns(context, params))),
})
