import { ActionForm } from '../../forms/action-form'
import { requestAnalysisAction } from './actions'

export function ComputeForm({ studyId, label }: { studyId: string; label: string }) {
  return (
    <ActionForm action={requestAnalysisAction} hidden={{ studyId }} submit={label} pendingLabel="Asking…" />
  )
}
