import { Notice } from '@/app/ui/primitives/notice'
import type { ParticipationView } from '@/lib/use-cases/returns/read-participation'
import { paths } from '@/lib/web/paths'

/** Where returning is no longer, or not yet, possible: said before anyone types for nothing. */
export function ClosedNotice({ view }: { view: ParticipationView }) {
  if (view.whyNot === null) return null
  if (view.whyNot === 'not-open')
    return (
      <Notice tone="warn" title="The study takes no returns at the moment">
        <p>
          What was entered is kept. The coordinators ({view.study.organisation}) can say whether results may
          still count.
        </p>
      </Notice>
    )
  return (
    <Notice tone="warn" title={`The deadline passed on ${view.due.text} in ${view.due.zoneText}`}>
      <p>
        What was entered is kept, but cannot be returned now.{' '}
        <a href={`${paths.participation(view.studyId)}#more-time`} className="prose-link">
          Ask the coordinator for more time
        </a>
        .
      </p>
    </Notice>
  )
}
