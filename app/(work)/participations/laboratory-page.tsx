import type { ReactNode } from 'react'
import { WorkTopBar } from '@/app/(work)/work-top-bar'
import { MarginNote } from '@/app/ui/layout/margin'
import { PageShell } from '@/app/ui/layout/page-shell'
import { Tag } from '@/app/ui/primitives/tag'
import { Time } from '@/app/ui/primitives/time'
import type { Actor } from '@/lib/domain/actor'
import type { ParticipationView } from '@/lib/use-cases/returns/read-participation'
import { paths } from '@/lib/web/paths'

interface LaboratoryPageProps {
  actor: Actor
  view: ParticipationView
  title: ReactNode
  lead?: ReactNode
  actions?: ReactNode
  /** Notes of this page, before those that every page of a participation carries. */
  margin?: ReactNode
  /** The study's own page needs no way back to itself. */
  isStart?: boolean
  children: ReactNode
}

/** A page of one laboratory in one study: the study above the title, the deadline and the code in the margin. */
export function LaboratoryPage({
  actor,
  view,
  title,
  lead,
  actions,
  margin,
  isStart = false,
  children,
}: LaboratoryPageProps) {
  const { studyId, study, code, due, dueDistance } = view
  return (
    <PageShell
      top={<WorkTopBar actor={actor} />}
      kicker={
        isStart ? (
          `${study.shortName} · ${study.organisation}`
        ) : (
          <>
            <a href={paths.participation(studyId)} className="prose-link">
              {study.shortName}
            </a>{' '}
            · {study.title}
          </>
        )
      }
      title={title}
      lead={lead}
      actions={actions}
      margin={
        <>
          {margin}
          <MarginNote title="Due">
            <p>
              <Time at={due.iso} text={due.text} /> in {due.zoneText}, {dueDistance}.
            </p>
          </MarginNote>
          <MarginNote
            title={
              <>
                Your code <Tag code={code} label="Code" />
              </>
            }
          >
            <p>
              It stands for your laboratory wherever results are shown. Keep it to yourselves: with it, anyone
              could tell which results are yours.
            </p>
          </MarginNote>
        </>
      }
    >
      {children}
    </PageShell>
  )
}
