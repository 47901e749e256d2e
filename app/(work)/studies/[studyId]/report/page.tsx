import type { Metadata } from 'next'
import { ProposalSteps } from '@/app/(work)/publishing/proposal-steps'
import { MarginNote } from '@/app/ui/layout/margin'
import { readReport } from '@/lib/use-cases/publications/read-report'
import { readStudy } from '@/lib/use-cases/studies/read-study'
import { requireActor, requestContext } from '@/lib/web/request-context'
import { StudyFrame } from '../study-frame'

export const metadata: Metadata = { title: 'Report' }

export default async function ReportPage({ params }: PageProps<'/studies/[studyId]/report'>) {
  const actor = await requireActor()
  const { studyId } = await params
  const context = await requestContext()
  const [view, report] = await Promise.all([readStudy(context, { studyId }), readReport(context, { studyId })])
  return (
    <StudyFrame
      view={view}
      actor={actor}
      station="report"
      title="Report: from proposal to published page"
      margin={
        <>
          <MarginNote title="Two people">
            <p>One proposes, another confirms. The database holds the rule as well.</p>
          </MarginNote>
          <MarginNote title="What is published">
            <p>The statement, the coded results and the decisions with their reasons. A text that names a laboratory of the study is stopped before it is frozen.</p>
          </MarginNote>
        </>
      }
    >
      <ProposalSteps report={report} />
    </StudyFrame>
  )
}
