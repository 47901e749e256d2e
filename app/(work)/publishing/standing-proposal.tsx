import type { ReactNode } from 'react'
import { PublishedStudy } from '@/app/ui/analysis/published-study'
import { Confirm } from '@/app/ui/primitives/confirm'
import { Notice } from '@/app/ui/primitives/notice'
import { showTime } from '@/lib/domain/show-time'
import type { ReportView } from '@/lib/use-cases/publications/read-report'
import { ActionForm } from '../studies/forms/action-form'
import { confirmPublicationAction } from './actions'

interface StandingProposalProps {
  report: ReportView
  proposal: NonNullable<ReportView['proposal']>
  /** What else the reader may do with it. */
  children?: ReactNode
}

/** A proposal that waits for its second person, with the page as the public would see it. */
export function StandingProposal({ report, proposal, children }: StandingProposalProps) {
  const { studyId } = report.study
  return (
    <>
      <Notice
        tone="info"
        title={`Proposed by ${proposal.isOwn ? 'you' : proposal.proposer} on ${showTime(proposal.proposedAt, 'UTC').text} UTC`}
      >
        <p className="mb-3">
          {proposal.isOwn
            ? 'A second person confirms it: another coordinator, or the chair of the committee. You cannot confirm your own proposal.'
            : 'Read the page below as the public will see it. Confirming publishes it at once, for everyone.'}
        </p>
        <div className="flex flex-wrap items-start gap-3">
          {report.mayConfirm && (
            <Confirm
              label="Confirm and publish"
              variant="primary"
              consequence="The page below becomes public now. It cannot be edited afterwards."
            >
              <ActionForm
                action={confirmPublicationAction}
                hidden={{ studyId, digest: proposal.digest }}
                submit="Publish now"
                pendingLabel="Publishing…"
              />
            </Confirm>
          )}
          {children}
        </div>
      </Notice>
      <section
        className="border-2 border-dashed px-4 py-6 sm:px-8"
        aria-label="Preview of the published page"
      >
        <h2 className="mb-6 font-heading text-title font-bold">{proposal.snapshot.study.title}</h2>
        <PublishedStudy snapshot={proposal.snapshot} />
      </section>
    </>
  )
}
