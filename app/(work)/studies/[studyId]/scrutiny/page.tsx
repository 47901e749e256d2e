import type { Metadata } from 'next'
import { CodedDownloads } from '@/app/ui/analysis/coded-downloads'
import { ConsistencyPlots } from '@/app/ui/analysis/consistency-plots'
import { MeasurandTabs } from '@/app/ui/analysis/measurand-tabs'
import { OutlierTests } from '@/app/ui/analysis/outlier-tests'
import { Section } from '@/app/ui/layout/section'
import { readReview } from '@/lib/use-cases/reviews/read-review'
import { readerContext } from '@/lib/web/reader-context'
import { chooseMeasurand } from '../choose-measurand'
import { loadStudy } from '../load-study'
import { StudyFrame } from '../study-frame'
import { AnalysisState } from './analysis-state'
import { CellDecisions } from './cell-decisions'
import { ScrutinyMargin } from './scrutiny-margin'

export const metadata: Metadata = { title: 'Scrutiny' }

export default async function ScrutinyPage({
  params,
  searchParams,
}: PageProps<'/studies/[studyId]/scrutiny'>) {
  const { studyId } = await params
  const { measurand: asked } = await searchParams
  const { actor, view } = await loadStudy(studyId)
  const review = await readReview(readerContext(actor), { studyId })
  const measurand = chooseMeasurand(review, asked)

  return (
    <StudyFrame
      view={view}
      actor={actor}
      station="scrutiny"
      title="Scrutiny: do the laboratories fit together?"
      margin={<ScrutinyMargin measurand={measurand} />}
    >
      <AnalysisState view={view} />
      {measurand && review.analysis && (
        <>
          <MeasurandTabs measurands={review.analysis.measurands} chosen={measurand.measurandId} />
          <ConsistencyPlots document={measurand.document} />
          <Section
            title="Outlier tests"
            note="A test proposes; a person decides. Pairs are consulted only where neither end alone is an outlier."
            actions={<CodedDownloads studyId={studyId} measurandId={measurand.measurandId} />}
          >
            <OutlierTests document={measurand.document} />
          </Section>
          <CellDecisions
            studyId={studyId}
            review={review}
            measurand={measurand}
            isOpen={view.study.state === 'closed'}
          />
        </>
      )}
    </StudyFrame>
  )
}
