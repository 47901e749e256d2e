import type { Metadata } from 'next'
import { PageShell } from '@/app/ui/layout/page-shell'
import { ButtonLink } from '@/app/ui/primitives/button'
import { ProposalSteps } from '@/app/(work)/publishing/proposal-steps'
import { readReport } from '@/lib/use-cases/publications/read-report'
import { paths } from '@/lib/web/paths'
import { requireActor, requestContext } from '@/lib/web/request-context'
import { WorkTopBar } from '../../../work-top-bar'

export const metadata: Metadata = { title: 'Confirm publication' }

/** Where the chair of a committee confirms what a coordinator proposed. */
export default async function ConfirmPage({ params }: PageProps<'/committee/[studyId]/confirm'>) {
  const actor = await requireActor()
  const { studyId } = await params
  const report = await readReport(await requestContext(), { studyId })
  return (
    <PageShell
      top={<WorkTopBar actor={actor} current="studies" />}
      kicker={report.study.shortName}
      title="Proposal to publish"
      actions={<ButtonLink href={paths.committee(studyId)}>Back to the study</ButtonLink>}
    >
      <ProposalSteps report={report} />
    </PageShell>
  )
}
