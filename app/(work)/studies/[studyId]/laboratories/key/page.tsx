import type { Metadata } from 'next'
import { MarginNote } from '@/app/ui/layout/margin'
import { ButtonLink } from '@/app/ui/primitives/button'
import { paths } from '@/lib/web/paths'
import { loadStudy } from '../../load-study'
import { StudyFrame } from '../../study-frame'
import { KeyForm } from './key-form'

export const metadata: Metadata = { title: 'Which laboratory is which' }

export default async function KeyPage({ params }: { params: Promise<{ studyId: string }> }) {
  const { studyId } = await params
  const { actor, view } = await loadStudy(studyId)
  return (
    <StudyFrame
      view={view}
      actor={actor}
      station="laboratories"
      title="Which laboratory is which"
      lead="The key to the codes of this study. It is shown once for each press, and every reading is recorded."
      actions={
        <ButtonLink href={paths.station(studyId, 'laboratories')}>Back to the laboratories</ButtonLink>
      }
      margin={
        <>
          <MarginNote title="Who may read it">
            <p>
              The coordinators of the organisation. The committee and the other laboratories never see it.
            </p>
          </MarginNote>
          <MarginNote title="What is recorded">
            <p>Who read the key and when stands in the audit trail, which cannot be changed.</p>
          </MarginNote>
        </>
      }
    >
      <KeyForm studyId={studyId} accepted={view.counts.accepted} />
    </StudyFrame>
  )
}
