import { z } from 'zod'
import { readStudy } from '@/lib/use-cases/studies/read-study'
import { routeHandler } from '@/lib/web/route-handler'

/** Whether the analysis asked for last is there. */
export const analysisProgress = z.object({ number: z.number().nullable(), done: z.boolean() })

export const GET = routeHandler({
  params: z.object({ studyId: z.string() }),
  run: async (context, { params: { studyId } }) => {
    const { analysis, computing } = await readStudy(context, { studyId })
    return analysisProgress.parse({ number: analysis?.number ?? null, done: !computing })
  },
})
