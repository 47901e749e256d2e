import { EmptyState } from '@/app/ui/primitives/empty-state'
import { Notice } from '@/app/ui/primitives/notice'
import type { StudyView } from '@/lib/use-cases/studies/read-study'
import { AnalysisProgress } from './analysis-progress'
import { ComputeForm } from './compute-form'

/** Whether the statistics are there, are being computed, or no longer match the returns; and the way to mend it. */
export function AnalysisState({ view }: { view: StudyView }) {
  const { study, analysis, computing, counts } = view
  const { studyId } = study
  const mayCompute = study.state === 'open' || study.state === 'closed'
  if (computing) return <AnalysisProgress studyId={studyId} />
  if (counts.returned === 0)
    return (
      <EmptyState title="Nothing to scrutinise yet">
        No laboratory has returned results. As soon as one has, the statistics can be computed here.
      </EmptyState>
    )
  if (!analysis)
    return (
      <EmptyState
        title="Not computed yet"
        action={mayCompute ? <ComputeForm studyId={studyId} label="Compute the statistics" /> : undefined}
      >
        {counts.returned} of {counts.accepted} laboratories have returned. Computing changes no result; it can
        be repeated at any time.
      </EmptyState>
    )
  if (!analysis.upToDate)
    return (
      <Notice tone="warn" title="Returns or decisions have changed since this was computed">
        <p className="mb-2">What stands below is analysis {analysis.number}, of an earlier state.</p>
        {mayCompute && <ComputeForm studyId={studyId} label="Compute again" />}
      </Notice>
    )
  return null
}
