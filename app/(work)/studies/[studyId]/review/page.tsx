import type { Metadata } from 'next'
import { MarginNote } from '@/app/ui/layout/margin'
import { Section } from '@/app/ui/layout/section'
import { ButtonLink } from '@/app/ui/primitives/button'
import { DataTable } from '@/app/ui/primitives/data-table'
import { Notice } from '@/app/ui/primitives/notice'
import { readCommittee } from '@/lib/use-cases/committee/appoint-committee-member'
import { paths } from '@/lib/web/paths'
import { loadStudy } from '../load-study'
import { StudyFrame } from '../study-frame'
import { ReviewSteps } from './review-steps'

export const metadata: Metadata = { title: 'Review' }

export default async function ReviewPage({ params }: PageProps<'/studies/[studyId]/review'>) {
  const { studyId } = await params
  const { actor, context, view } = await loadStudy(studyId)
  const { members } = await readCommittee(context, { studyId })
  const isBefore = view.study.state === 'in-review' || view.study.state === 'published'

  return (
    <StudyFrame
      view={view}
      actor={actor}
      station="review"
      title="Review: what the committee reads"
      margin={
        <MarginNote title="What the committee sees">
          <p>
            Codes, results, plots and tables; never a laboratory’s name. Its pages are read through a
            connection to the database that holds no name.
          </p>
        </MarginNote>
      }
    >
      {members.length === 0 && (
        <Notice tone="warn" title="No committee is named">
          Name its members under Laboratories, so that someone reads the statement before it is published.
        </Notice>
      )}
      <Section
        title={isBefore ? 'Before its committee' : 'Not before its committee yet'}
        actions={
          isBefore ? (
            <ButtonLink href={paths.committee(studyId)}>Read what the committee reads</ButtonLink>
          ) : undefined
        }
      >
        <ReviewSteps view={view} />
      </Section>
      <Section title="The committee" note="Named under Laboratories.">
        <DataTable
          caption="Members of the committee"
          isCaptionHidden
          rows={members}
          rowKey={({ personId }) => personId}
          empty={<p className="text-ink-soft">Nobody yet.</p>}
          columns={[
            { key: 'name', header: 'Name', isRowHeader: true, cell: ({ name }) => name },
            { key: 'role', header: 'Role', cell: ({ role }) => role },
            { key: 'address', header: 'Address', cell: ({ address }) => address },
          ]}
        />
      </Section>
    </StudyFrame>
  )
}
