import { z } from 'zod'
import { NotFound } from '@/lib/domain/errors'
import { readPublication } from '@/lib/use-cases/publications/read-publications'
import { readerContext } from '@/lib/web/reader-context'
import { fileReply } from '@/lib/web/file-reply'
import { publicRouteHandler } from '@/lib/web/route-handler'

const params = z.object({ slug: z.string(), file: z.string() })

/** The coded results of a published measurand, or its analysis, as a file. */
export const GET = publicRouteHandler({
  params,
  run: async (_context, { params: { slug, file } }) => {
    const { snapshot } = await readPublication(readerContext(null), { slug })
    const [, kind, number] = /^(results|analysis)-(\d+)\.(?:csv|json)$/.exec(file) ?? []
    const measurand = snapshot.measurands[Number(number) - 1]
    if (!measurand || file !== `${kind}-${number}.${kind === 'results' ? 'csv' : 'json'}`)
      throw new NotFound('file')
    return kind === 'results'
      ? fileReply({
          body: measurand.csv,
          type: 'text/csv; charset=utf-8',
          fileName: `${slug}-results-${number}.csv`,
        })
      : fileReply({
          body: JSON.stringify(measurand.document, null, 2),
          type: 'application/json',
          fileName: `${slug}-analysis-${number}.json`,
        })
  },
})
