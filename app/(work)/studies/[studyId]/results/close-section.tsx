import { Section } from '@/app/ui/layout/section'
import type { ReturnsView } from '@/lib/use-cases/returns/watch-returns'
import { CloseForm } from './close-form'

/** Ends the round. Before the deadline it needs a reason, since laboratories were promised the time. */
export function CloseSection({ returns: { study, lanes, returned, now } }: { returns: ReturnsView }) {
  const isEarly = now < study.deadline.dueAt
  const waiting = lanes.length - returned
  if (returned === 0)
    return (
      <Section title="Close for returns" id="close">
        <p className="max-w-text">
          No laboratory has returned results yet, so there is nothing to close and nothing to scrutinise.
        </p>
      </Section>
    )
  return (
    <Section title="Close for returns" id="close">
      <div className="flex max-w-text flex-col gap-4 border bg-sheet p-4" data-screen-only>
        <p>
          {returned} of {lanes.length} laboratories have returned.{' '}
          {waiting > 0 &&
            `${waiting === 1 ? 'The one that has' : `The ${waiting} that have`} not can no longer do so. `}
          {isEarly && 'The deadline has not passed, so this needs a reason. '}
          The study can be reopened until it goes to its committee.
        </p>
        <CloseForm studyId={study.studyId} isEarly={isEarly} />
      </div>
    </Section>
  )
}
