import type { Metadata } from 'next'
import { MarginNote } from '@/app/ui/layout/margin'
import { readReport } from '@/lib/use-cases/publications/read-report'
import { loadStudy } from '../load-study'
import { StudyFrame } from '../study-frame'
import { ReportSteps } from './report-steps'

export const metadata: Metadata = { title: 'Report' }

export default async function ReportPage({ params }: PageProps<'/studies/[studyId]/report'>) {
  const { studyId } = await params
  const { actor, context, view } = await loadStudy(studyId)
  const report = await readReport(context, { studyId })
  return (
    <StudyFrame
      view={view}
      actor={actor}
      station="report"
      title="Report: from proposal to published page"
      margin={
        <>
          <MarginNote title="Two people">
            <p>One proposes, another confirms; nobody can do both for one study.</p>
          </MarginNote>
          <MarginNote title="What is published">
            <p>
              The statement, the coded results and the decisions with their reasons. A text that names a
              laboratory of the study is stopped before it is frozen.
            </p>
          </MarginNote>
        </>
      }
    >
      <ReportSteps report={report} />
    </StudyFrame>
  )
}
