import type { Metadata } from 'next'
import { MeasurandTabs } from '@/app/ui/analysis/measurand-tabs'
import { PrecisionReport } from '@/app/ui/analysis/precision-report'
import { PrecisionNotes } from '@/app/ui/analysis/precision-notes'
import { readReview } from '@/lib/use-cases/reviews/read-review'
import { readerContext } from '@/lib/web/reader-context'
import { chooseMeasurand } from '../choose-measurand'
import { loadStudy } from '../load-study'
import { AnalysisState } from '../scrutiny/analysis-state'
import { StudyFrame } from '../study-frame'

export const metadata: Metadata = { title: 'Precision' }

export default async function PrecisionPage({
  params,
  searchParams,
}: PageProps<'/studies/[studyId]/precision'>) {
  const { studyId } = await params
  const { measurand: asked } = await searchParams
  const { actor, view } = await loadStudy(studyId)
  const review = await readReview(readerContext(actor), { studyId })
  const measurand = chooseMeasurand(review, asked)

  return (
    <StudyFrame
      view={view}
      actor={actor}
      station="precision"
      title="Precision: how far may two results differ?"
      margin={<PrecisionNotes limitFactor={view.study.limitFactor} />}
    >
      <AnalysisState view={view} />
      {measurand && review.analysis && (
        <>
          <MeasurandTabs measurands={review.analysis.measurands} chosen={measurand.measurandId} />
          <PrecisionReport measurand={measurand} />
        </>
      )}
    </StudyFrame>
  )
}
