import { z } from 'zod'
import { NotFound } from '@/lib/domain/errors'
import { readReview } from '@/lib/use-cases/reviews/read-review'
import { fileReply } from '@/lib/web/file-reply'
import { readerContext } from '@/lib/web/reader-context'
import { routeHandler } from '@/lib/web/route-handler'

const params = z.object({ studyId: z.string(), file: z.string() })

/** A measurand's coded results, or its analysis, for those who review the study. */
export const GET = routeHandler({
  params,
  run: async ({ actor }, { params: { studyId, file } }) => {
    const review = await readReview(readerContext(actor), { studyId })
    const [id, kind] = file.split('.')
    const measurand = review.analysis?.measurands.find(({ measurandId }) => measurandId === id)
    const name = `${review.study.shortName}-${measurand?.name ?? ''}`.toLowerCase()
    if (measurand && kind === 'csv')
      return fileReply({
        body: measurand.csv,
        type: 'text/csv; charset=utf-8',
        fileName: `${name}-results.csv`,
      })
    if (measurand && kind === 'json')
      return fileReply({
        body: JSON.stringify(measurand.document, null, 2),
        type: 'application/json',
        fileName: `${name}-analysis.json`,
      })
    throw new NotFound('file')
  },
})
