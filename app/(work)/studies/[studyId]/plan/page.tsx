import type { Metadata } from 'next'
import { beginPlan } from '@/lib/domain/begin-plan'
import { listZones } from '@/lib/domain/list-zones'
import { PlanForm } from '../../forms/plan-form'
import { loadStudy } from '../load-study'
import { StudyFrame } from '../study-frame'
import { planStudyAction } from './actions'
import { ForeseenPrecision } from './foreseen-precision'
import { MoveDeadline } from './move-deadline'
import { PlanMargin } from './plan-margin'
import { SettledPlan } from './settled-plan'

export const metadata: Metadata = { title: 'Plan' }

interface PlanPageProps {
  params: Promise<{ studyId: string }>
  searchParams: Promise<Record<string, string | string[] | undefined>>
}

export default async function PlanPage({ params, searchParams }: PlanPageProps) {
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
      margin={<PlanMargin isDraft={isDraft} />}
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
      {(isDraft || study.state === 'open') && <ForeseenPrecision view={view} query={await searchParams} />}
    </StudyFrame>
  )
}
