import { PublishedNotice } from '@/app/(work)/publishing/published-notice'
import { StandingProposal } from '@/app/(work)/publishing/standing-proposal'
import { Section } from '@/app/ui/layout/section'
import { Confirm } from '@/app/ui/primitives/confirm'
import { EmptyState } from '@/app/ui/primitives/empty-state'
import type { ReportView } from '@/lib/use-cases/publications/read-report'
import { ActionForm } from '../../forms/action-form'
import { ReasonForm } from '../../forms/reason-form'
import { proposePublicationAction, withdrawProposalAction } from './actions'

/** Publishing takes one person's proposal and another's confirmation; this shows whichever comes next. */
export function ReportSteps({ report }: { report: ReportView }) {
  const { study, analysis, publication, proposal } = report
  const { studyId } = study
  if (publication) return <PublishedNotice publication={publication} />
  if (study.state !== 'in-review')
    return (
      <EmptyState title="Not yet">
        A study is published from its committee’s review. Put it before the committee first.
      </EmptyState>
    )
  if (proposal)
    return (
      <StandingProposal report={report} proposal={proposal}>
        <Confirm
          label="Withdraw the proposal"
          variant="plain"
          consequence="The proposal falls; another can be made later."
        >
          <ReasonForm
            action={withdrawProposalAction}
            hidden={{ studyId }}
            submit="Withdraw the proposal"
            pendingLabel="Withdrawing…"
          />
        </Confirm>
      </StandingProposal>
    )
  return (
    <Section title="Propose publication">
      <div className="flex flex-col items-start gap-3">
        <p className="max-w-text">
          Proposing freezes analysis {analysis?.number ?? ''} with the coded results and decisions as they
          stand. Nothing is public until a second person confirms it.
        </p>
        <ActionForm
          action={proposePublicationAction}
          hidden={{ studyId }}
          submit="Propose publication"
          pendingLabel="Freezing…"
        />
      </div>
    </Section>
  )
}
