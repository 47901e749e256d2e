import type { Metadata } from 'next'
import { MarginNote } from '@/app/ui/layout/margin'
import { Section } from '@/app/ui/layout/section'
import { DownloadLink } from '@/app/ui/primitives/download-link'
import { auditActions } from '@/lib/domain/describe-audit-entry'
import { readTrail } from '@/lib/use-cases/trail/read-trail'
import { loadStudy } from '../load-study'
import { StudyFrame } from '../study-frame'
import { TrailFilter } from './trail-filter'
import { TrailTable } from './trail-table'
import { TrailVerdict } from './trail-verdict'

export const metadata: Metadata = { title: 'Audit trail' }

interface TrailPageProps {
  params: Promise<{ studyId: string }>
  searchParams: Promise<Record<string, string | string[] | undefined>>
}

export default async function TrailPage({ params, searchParams }: TrailPageProps) {
  const { studyId } = await params
  const query = await searchParams
  const { actor, context, view } = await loadStudy(studyId)
  const trail = await readTrail(context, { studyId })
  const action = auditActions.find((each) => each === [query.action].flat()[0]) ?? null
  const present = auditActions.filter((each) => trail.entries.some((entry) => entry.action === each))
  const shown = trail.entries.filter((entry) => !action || entry.action === action)

  return (
    <StudyFrame
      view={view}
      actor={actor}
      station="trail"
      title="Audit trail"
      lead="Everything anyone decided in this study, in the order it was decided. Nothing in it can be changed or taken out."
      actions={
        <DownloadLink href={`/api/studies/${studyId}/trail`} format="JSON">
          Save the trail
        </DownloadLink>
      }
      margin={
        <>
          <MarginNote title="How it is verified">
            <p>
              Each entry carries the SHA-256 digest of the one before it and of itself. At every look at this
              page the whole chain is computed again and held against its kept head.
            </p>
          </MarginNote>
          <MarginNote title="To be sure later">
            <p>
              Write the head down, or have it stand in the minutes. A trail that ends in another head is
              another trail.
            </p>
          </MarginNote>
          <MarginNote title="Laboratories">
            <p>By code where they act; no entry says a name or an address.</p>
          </MarginNote>
        </>
      }
    >
      <TrailVerdict verdict={trail.verdict} head={trail.head} count={trail.entries.length} />
      <Section
        title="Entries"
        note={action ? `${shown.length} of ${trail.entries.length}` : `${trail.entries.length} in all`}
      >
        <div className="flex flex-col gap-3">
          <TrailFilter studyId={studyId} chosen={action} actions={present} />
          <TrailTable
            entries={shown}
            words={{ subjects: trail.subjects, zone: trail.study.deadline.zone }}
            broken={trail.verdict?.sequence}
          />
        </div>
      </Section>
    </StudyFrame>
  )
}
