import type { Metadata } from 'next'
import { PageShell } from '@/app/ui/layout/page-shell'
import { ButtonLink } from '@/app/ui/primitives/button'
import { EmptyState } from '@/app/ui/primitives/empty-state'
import { PublishedNotice } from '@/app/(work)/publishing/published-notice'
import { StandingProposal } from '@/app/(work)/publishing/standing-proposal'
import { readReport } from '@/lib/use-cases/publications/read-report'
import { orNotFound } from '@/lib/web/or-not-found'
import { paths } from '@/lib/web/paths'
import { requireActor, requestContext } from '@/lib/web/request-context'
import { WorkTopBar } from '../../../work-top-bar'

export const metadata: Metadata = { title: 'Confirm publication' }

/** Where the chair of a committee confirms what a coordinator proposed. */
export default async function ConfirmPage({ params }: PageProps<'/committee/[studyId]/confirm'>) {
  const actor = await requireActor()
  const { studyId } = await params
  const report = await orNotFound(readReport(await requestContext(), { studyId }))
  return (
    <PageShell
      top={<WorkTopBar actor={actor} current="studies" />}
      kicker={report.study.shortName}
      title="Proposal to publish"
      actions={<ButtonLink href={paths.committee(studyId)}>Back to the study</ButtonLink>}
    >
      {report.publication && <PublishedNotice publication={report.publication} />}
      {report.proposal && <StandingProposal report={report} proposal={report.proposal} />}
      {!report.publication && !report.proposal && (
        <EmptyState title="Nothing is proposed yet">
          A coordinator proposes publication; you are asked to confirm it then.
        </EmptyState>
      )}
    </PageShell>
  )
}
