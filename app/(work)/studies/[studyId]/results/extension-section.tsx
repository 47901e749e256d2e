import Link from 'next/link'
import { Section } from '@/app/ui/layout/section'
import { Tag } from '@/app/ui/primitives/tag'
import { Time } from '@/app/ui/primitives/time'
import { showTime } from '@/lib/domain/show-time'
import type { ReturnsView } from '@/lib/use-cases/returns/watch-returns'
import { paths } from '@/lib/web/paths'
import { DeadlineForm } from '../../forms/deadline-form'
import { grantExtensionAction } from './actions'

interface ExtensionSectionProps extends Pick<ReturnsView, 'study' | 'lanes'> {
  /** The code of a laboratory to be given more time, whether it asked or not. */
  chosen: string | undefined
}

/** More time for one laboratory: those that ask, and one that the page was opened for. */
export function ExtensionSection({ study, lanes, chosen }: ExtensionSectionProps) {
  const waiting = lanes.filter(({ returns }) => returns === 0)
  const shown = lanes.filter((lane) => lane.request !== null || lane.code === chosen)
  const others = waiting.filter((lane) => !shown.includes(lane))
  if (shown.length === 0 && others.length === 0) return null
  return (
    <Section
      title="More time for one laboratory"
      id="extend"
      note="The others keep the deadline. The laboratory is told by mail."
    >
      <div className="flex flex-col gap-4">
        {shown.map((lane) => (
          <ExtensionCard key={lane.code} study={study} lane={lane} />
        ))}
        {others.length > 0 && (
          <p className="flex flex-wrap items-center gap-x-4 gap-y-2" data-screen-only>
            <span className="text-ink-soft">
              {shown.length > 0 ? 'Or for another:' : 'For which laboratory?'}
            </span>
            {others.map(({ code }) => (
              <Link
                key={code}
                href={`${paths.station(study.studyId, 'results')}?extend=${code}#extend`}
                className="inline-flex min-h-6"
              >
                <Tag code={code} label="Laboratory" />
              </Link>
            ))}
          </p>
        )}
      </div>
    </Section>
  )
}

function ExtensionCard({ study, lane }: { study: ReturnsView['study']; lane: ReturnsView['lanes'][number] }) {
  const { zone } = study.deadline
  const asked = lane.request && showTime(lane.request.requestedAt, zone)
  const extended = lane.extendedTo && showTime(lane.extendedTo, zone)
  return (
    <div className="max-w-text border bg-sheet p-4">
      <h3 className="mb-2 flex flex-wrap items-center gap-2 font-semibold">
        <Tag code={lane.code} label="Laboratory" />
        {asked ? 'asks for more time' : 'has not asked for more time'}
      </h3>
      {asked && (
        <blockquote className="mb-3 max-w-text border-l-[3px] pl-3">
          <p>{lane.request?.message}</p>
          <footer className="text-small text-ink-soft">
            <Time at={asked.iso} text={asked.text} />
          </footer>
        </blockquote>
      )}
      {extended && (
        <p className="mb-3 text-small text-ink-soft">
          It was given time until <Time at={extended.iso} text={extended.text} /> before.
        </p>
      )}
      <DeadlineForm
        scope={`extend-${lane.code}`}
        action={grantExtensionAction}
        hidden={{ studyId: study.studyId, code: lane.code }}
        hint={`In ${showTime(study.deadline.dueAt, zone).zoneText}.`}
        reasonLabel="Reason"
        submit={`Give ${lane.code} more time`}
        pendingLabel="Giving…"
      />
    </div>
  )
}
