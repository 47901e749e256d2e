import Link from 'next/link'
import type { ReactNode } from 'react'
import { Course, type Station as DrawnStation } from '@/app/ui/layout/course'
import { MarginNote } from '@/app/ui/layout/margin'
import { PageShell } from '@/app/ui/layout/page-shell'
import type { Actor } from '@/lib/domain/actor'
import { courseOf, type CourseStation } from '@/lib/domain/study-course'
import type { StudyView } from '@/lib/use-cases/studies/read-study'
import { paths, type Station } from '@/lib/web/paths'
import { WorkTopBar } from '../../work-top-bar'

interface StudyFrameProps {
  view: StudyView
  actor: Actor
  /** The station the page belongs to; null for the study's own page. */
  station: Station | null
  title: ReactNode
  lead?: ReactNode
  actions?: ReactNode
  margin?: ReactNode
  children: ReactNode
}

/** Every page of a study as its coordinator sees it: the bar, what study it is, its course, the work, the margin. */
export function StudyFrame({
  view,
  actor,
  station,
  title,
  lead,
  actions,
  margin,
  children,
}: StudyFrameProps) {
  const { study, layout } = view
  return (
    <PageShell
      top={<WorkTopBar actor={actor} current="studies" />}
      kicker={
        <>
          <Link href={paths.study(study.studyId)} className="prose-link inline-block min-h-6">
            {study.shortName}
          </Link>
          {` · ${layout.measurands.map(({ name }) => name).join(', ')}`}
        </>
      }
      title={title}
      lead={lead}
      actions={actions}
      course={
        <Course stations={courseOf(view).map((each) => drawn(each, { studyId: study.studyId, station }))} />
      }
      margin={
        <>
          {margin}
          <MarginNote title="Elsewhere in this study">
            <ul className="flex flex-col gap-1">
              {station !== null && (
                <li>
                  <Link href={paths.study(study.studyId)} className="inline-block min-h-6">
                    What needs someone today
                  </Link>
                </li>
              )}
              {station !== 'trail' && (
                <li>
                  <Link href={paths.station(study.studyId, 'trail')} className="inline-block min-h-6">
                    The audit trail
                  </Link>
                </li>
              )}
            </ul>
          </MarginNote>
        </>
      }
    >
      {children}
    </PageShell>
  )
}

function drawn(
  { key, name, state, phase }: CourseStation,
  place: { studyId: string; station: Station | null },
): DrawnStation {
  // Kits travel outside the product, so there is no page to lead to.
  if (key === 'dispatch') return { name, state, phase }
  return {
    name,
    state,
    href: paths.station(place.studyId, key),
    phase: key === place.station ? 'current' : phase,
  }
}
