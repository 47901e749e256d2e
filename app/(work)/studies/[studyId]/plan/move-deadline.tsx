import { Section } from '@/app/ui/layout/section'
import type { ZoneGroup } from '@/lib/domain/list-zones'
import type { StudyView } from '@/lib/use-cases/studies/read-study'
import { DeadlineForm } from '../../forms/deadline-form'
import { setDeadlineAction } from './actions'

/** One deadline for all; a single laboratory gets more time on the page of results. */
export function MoveDeadline({ study, zones }: Pick<StudyView, 'study'> & { zones: readonly ZoneGroup[] }) {
  const { localTime, zone } = study.deadline
  return (
    <Section
      title="Move the deadline"
      note="For every laboratory. More time for a single one is given under Results."
      id="deadline"
    >
      <div className="max-w-text border bg-sheet p-4">
        <DeadlineForm
          action={setDeadlineAction}
          hidden={{ studyId: study.studyId }}
          zones={zones}
          begun={{ localTime, zone }}
          submit="Move the deadline"
          pendingLabel="Moving…"
        />
      </div>
    </Section>
  )
}
