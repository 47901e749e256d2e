import {
  findAnonymousAnalysis,
  findAnonymousStudy,
  listAnonymousExclusions,
  listAnonymousLevels,
  listAnonymousMaterials,
  listAnonymousMeasurands,
  type AnonymousExclusion,
  type AnonymousStudy,
} from '@/db/anonymous/review'
import { NotFound } from '@/lib/domain/errors'
import { authorise } from '@/lib/domain/permissions'
import type { ReaderContext } from '@/lib/reader-context'
import type { AnalysisDocument } from '@/lib/statistics/analysis-document'

export interface MeasurandReview {
  readonly measurandId: string
  readonly name: string
  readonly unit: string
  readonly decimals: number
  readonly hasTrueZero: boolean
  readonly document: AnalysisDocument
  readonly csv: string
  readonly exclusions: readonly AnonymousExclusion[]
}

export interface ReviewView {
  readonly study: AnonymousStudy
  readonly levels: readonly { name: string; count: number }[]
  readonly materials: readonly { materialId: string; name: string; description: string }[]
  readonly analysis: {
    number: number
    engineVersion: string
    digest: string
    measurands: readonly MeasurandReview[]
  } | null
}

/**
 * The coded results of a study and their statistics, as its committee reads them. A committee sees them once
 * they are put before it; a coordinator from the first analysis on, by the same words and codes.
 */
export async function readReview(
  context: ReaderContext,
  { studyId }: { studyId: string },
): Promise<ReviewView> {
  const { reader, actor } = context
  const study = await findAnonymousStudy(reader, studyId)
  if (!study) throw new NotFound('study')
  const role = authorise(actor, 'review.read', study)
  const committeeWaits =
    !['in-review', 'published'].includes(study.state) && !['administrator', 'coordinator'].includes(role)
  const [levels, materials, measurands, analysis, exclusions] = await Promise.all([
    listAnonymousLevels(reader, studyId),
    listAnonymousMaterials(reader, studyId),
    listAnonymousMeasurands(reader, studyId),
    committeeWaits ? undefined : findAnonymousAnalysis(reader, studyId),
    committeeWaits ? [] : listAnonymousExclusions(reader, studyId),
  ])
  if (!analysis) return { study, levels, materials, analysis: null }
  const documents = new Map(analysis.documents.map((each) => [each.measurandId, each]))
  return {
    study,
    levels,
    materials,
    analysis: {
      number: analysis.number,
      engineVersion: analysis.engineVersion,
      digest: analysis.digest,
      measurands: measurands.flatMap((measurand) => {
        const found = documents.get(measurand.measurandId)
        return found
          ? [
              {
                ...measurand,
                document: JSON.parse(found.document) as AnalysisDocument,
                csv: found.csv,
                exclusions: exclusions.filter((each) => each.measurandId === measurand.measurandId),
              },
            ]
          : []
      }),
    },
  }
}
