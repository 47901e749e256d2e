import type { Metadata } from 'next'
import { MarginNote } from '@/app/ui/layout/margin'
import { beginPlan } from '@/lib/domain/begin-plan'
import { listZones } from '@/lib/domain/list-zones'
import { PlanForm } from '../../forms/plan-form'
import { loadStudy } from '../load-study'
import { StudyFrame } from '../study-frame'
import { planStudyAction } from './actions'
import { MoveDeadline } from './move-deadline'
import { SettledPlan } from './settled-plan'

export const metadata: Metadata = { title: 'Plan' }

export default async function PlanPage({ params }: { params: Promise<{ studyId: string }> }) {
  const { studyId } = await params
  const { actor, view } = await loadStudy(studyId)
  const { study, layout } = view
  const isDraft = study.state === 'draft'

  return (
    <StudyFrame
      view={view}
      actor={actor}
      station="plan"
      title={isDraft ? 'Plan' : study.title}
      lead={isDraft ? 'Everything can be changed until the invitations are sent.' : undefined}
      margin={
        <>
          <MarginNote title="What happens next">
            <p>
              {isDraft
                ? 'Name the laboratories, then send the invitations. From then on the plan stands.'
                : 'The plan stands since the invitations were sent: what a laboratory was asked does not change under its hands.'}
            </p>
          </MarginNote>
          <MarginNote title="Limits">
            <p>
              r = f·s<sub>r</sub> and R = f·s<sub>R</sub>, with f the factor chosen here. 2.8 is 1.96·√2
              rounded.
            </p>
          </MarginNote>
          <MarginNote title="Deadline">
            <p>
              Kept as meant: the day and hour in the zone you chose. Clock changes are settled here, not
              guessed later.
            </p>
          </MarginNote>
        </>
      }
    >
      {isDraft ? (
        <PlanForm
          action={planStudyAction}
          hidden={{ studyId }}
          begun={beginPlan({ study, layout })}
          zones={listZones()}
          submit="Save the plan"
        />
      ) : (
        <>
          <SettledPlan study={study} layout={layout} />
          {study.state === 'open' && <MoveDeadline study={study} zones={listZones()} />}
        </>
      )}
    </StudyFrame>
  )
}
