import Link from 'next/link'
import { Section } from '@/app/ui/layout/section'
import { Confirm } from '@/app/ui/primitives/confirm'
import { showTime } from '@/lib/domain/show-time'
import type { LaboratoriesView } from '@/lib/use-cases/laboratories/read-laboratories'
import { paths } from '@/lib/web/paths'
import { PressForm } from '../../forms/press-form'
import { openStudyAction } from './actions'

/** The step that cannot be taken back: it says what will happen, and to whom, before it does. */
export function SendInvitations({
  study,
  now,
  count,
}: Pick<LaboratoriesView, 'study' | 'now'> & { count: number }) {
  const due = showTime(study.deadline.dueAt, study.deadline.zone)
  if (count < 2)
    return (
      <Section title="Send the invitations" id="send">
        <p className="max-w-text">
          Name at least two laboratories first: with one there is nothing to compare. Sending then invites all
          of them at once.
        </p>
      </Section>
    )
  if (study.deadline.dueAt <= now)
    return (
      <Section title="Send the invitations" id="send">
        <p className="max-w-text">
          The deadline, {due.text} in {due.zoneText}, has passed.{' '}
          <Link href={`${paths.station(study.studyId, 'plan')}#field-deadline`} className="prose-link">
            Choose a later one
          </Link>{' '}
          before anyone is asked.
        </p>
      </Section>
    )
  return (
    <Section title="Send the invitations" id="send">
      <Confirm
        label="Send the invitations"
        variant="primary"
        consequence={
          <p>
            Sending invites {count} laboratories now; each may accept until {due.text} in {due.zoneText},
            shown to it in its own time. The study is then open for returns and its plan stands as it is.
          </p>
        }
      >
        <PressForm
          action={openStudyAction}
          hidden={{ studyId: study.studyId }}
          variant="primary"
          pendingLabel="Sending…"
        >
          Send {count} invitations now
        </PressForm>
      </Confirm>
    </Section>
  )
}
