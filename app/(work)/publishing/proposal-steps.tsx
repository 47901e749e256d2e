import Link from 'next/link'
import { Section } from '@/app/ui/layout/section'
import { Confirm } from '@/app/ui/primitives/confirm'
import { EmptyState } from '@/app/ui/primitives/empty-state'
import { Notice } from '@/app/ui/primitives/notice'
import { PublishedStudy } from '@/app/ui/analysis/published-study'
import { showTime } from '@/lib/domain/show-time'
import type { ReportView } from '@/lib/use-cases/publications/read-report'
import { paths } from '@/lib/web/paths'
import { ActionForm } from '../studies/forms/action-form'
import { ReasonForm } from '../studies/forms/reason-form'
import { confirmPublicationAction, proposePublicationAction, withdrawProposalAction } from './actions'

/** Publishing takes one person's proposal and another's confirmation; this shows whichever comes next. */
export function ProposalSteps({ report }: { report: ReportView }) {
  const { study, publication, proposal } = report
  if (publication)
    return (
      <Notice tone="done" title="Published">
        <p>
          Proposed by {publication.proposer}, confirmed by {publication.confirmer} on {showTime(publication.confirmedAt, 'UTC').text} UTC.{' '}
          <Link href={paths.publication(publication.slug)} className="prose-link">
            Read the published page
          </Link>
        </p>
      </Notice>
    )
  if (study.state !== 'in-review')
    return <EmptyState title="Not yet">A study is published from its committee’s review. Put it before the committee first.</EmptyState>
  if (!proposal) return <Propose report={report} />
  return <Standing report={report} proposal={proposal} />
}

function Propose({ report }: { report: ReportView }) {
  const { study, analysis, mayPropose } = report
  if (!mayPropose) return <EmptyState title="Nothing is proposed yet">A coordinator proposes publication; you are asked to confirm it then.</EmptyState>
  return (
    <Section title="Propose publication">
      <div className="flex flex-col items-start gap-3">
        <p className="max-w-text">
          Proposing freezes analysis {analysis?.number ?? ''} with the coded results and decisions as they stand. Nothing is public until a second
          person confirms it.
        </p>
        <ActionForm action={proposePublicationAction} hidden={{ studyId: study.studyId }} submit="Propose publication" pendingLabel="Freezing…" />
      </div>
    </Section>
  )
}

function Standing({ report, proposal }: { report: ReportView; proposal: NonNullable<ReportView['proposal']> }) {
  const { studyId } = report.study
  return (
    <>
      <Notice tone="info" title={`Proposed by ${proposal.isOwn ? 'you' : proposal.proposer} on ${showTime(proposal.proposedAt, 'UTC').text} UTC`}>
        <p className="mb-3">
          {proposal.isOwn
            ? 'A second person confirms it: another coordinator, or the chair of the committee. You cannot confirm your own proposal.'
            : 'Read the page below as the public will see it. Confirming publishes it at once, for everyone.'}
        </p>
        <div className="flex flex-wrap items-start gap-3">
          {report.mayConfirm && (
            <Confirm label="Confirm and publish" variant="primary" consequence="The page below becomes public now. It cannot be edited afterwards.">
              <ActionForm
                action={confirmPublicationAction}
                hidden={{ studyId, digest: proposal.digest }}
                submit="Publish now"
                pendingLabel="Publishing…"
              />
            </Confirm>
          )}
          {report.mayPropose && (
            <Confirm label="Withdraw the proposal" variant="plain" consequence="The proposal falls; another can be made later.">
              <ReasonForm action={withdrawProposalAction} hidden={{ studyId }} submit="Withdraw the proposal" pendingLabel="Withdrawing…" />
            </Confirm>
          )}
        </div>
      </Notice>
      <div className="border-2 border-dashed px-4 py-6 sm:px-8" aria-label="Preview of the published page" role="region">
        <h2 className="mb-6 font-heading text-title font-bold">{proposal.snapshot.study.title}</h2>
        <PublishedStudy snapshot={proposal.snapshot} />
      </div>
    </>
  )
}
