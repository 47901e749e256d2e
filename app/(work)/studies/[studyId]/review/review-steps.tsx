import { Confirm } from '@/app/ui/primitives/confirm'
import type { StudyView } from '@/lib/use-cases/studies/read-study'
import { ActionForm } from '../../forms/action-form'
import { ReasonForm } from '../../forms/reason-form'
import { sendToReviewAction, takeBackFromReviewAction } from './actions'

/** The step into the committee's review or back from it, whichever the study's state allows. */
export function ReviewSteps({ view }: { view: StudyView }) {
  const { studyId, state } = view.study
  if (state === 'published')
    return <p className="max-w-text">The committee has read this study, and it is published.</p>
  if (state === 'in-review')
    return (
      <div className="flex flex-col items-start gap-3">
        <p className="max-w-text">
          The committee reads analysis {view.analysis?.number ?? ''}. While it does, no cell can be set aside
          and no return replaced.
        </p>
        <Confirm
          label="Take back to scrutiny"
          variant="plain"
          consequence="The committee no longer sees the study until it is put before it again. A standing proposal to publish falls."
        >
          <ReasonForm
            action={takeBackFromReviewAction}
            hidden={{ studyId }}
            submit="Take back to scrutiny"
            pendingLabel="Taking back…"
          />
        </Confirm>
      </div>
    )
  if (state !== 'closed')
    return (
      <p className="max-w-text">
        The study goes before its committee once returns are closed and scrutinised.
      </p>
    )
  return (
    <div className="flex flex-col items-start gap-3">
      <p className="max-w-text">
        When scrutiny is done, the committee reads the coded results, the consistency plots and the precision
        tables.
      </p>
      <ActionForm
        action={sendToReviewAction}
        hidden={{ studyId }}
        submit="Put before the committee"
        pendingLabel="Sending…"
      />
    </div>
  )
}
