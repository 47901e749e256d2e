import { Section } from '@/app/ui/layout/section'
import type { ZoneGroup } from '@/lib/domain/list-zones'
import type { ReturnsView } from '@/lib/use-cases/returns/watch-returns'
import { DeadlineForm } from '../../forms/deadline-form'
import { reopenStudyAction } from './actions'

/** Opens a closed study again, for every laboratory and until a new deadline. */
export function ReopenSection({
  study,
  zones,
}: Pick<ReturnsView, 'study'> & { zones: readonly ZoneGroup[] }) {
  return (
    <Section title="Reopen for returns" id="reopen" note="As long as the study is not before its committee.">
      <div className="flex max-w-text flex-col gap-4 border bg-sheet p-4" data-screen-only>
        <p>
          Every laboratory that accepted can return again until the new deadline. An analysis made so far will
          be out of date once one does.
        </p>
        <DeadlineForm
          scope="reopen"
          action={reopenStudyAction}
          hidden={{ studyId: study.studyId }}
          zones={zones}
          begun={{ localTime: '', zone: study.deadline.zone }}
          reasonLabel="Reason"
          submit="Reopen it"
          pendingLabel="Reopening…"
        />
      </div>
    </Section>
  )
}
