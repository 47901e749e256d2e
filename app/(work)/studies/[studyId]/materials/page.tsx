import type { Metadata } from 'next'
import { MarginNote } from '@/app/ui/layout/margin'
import { Section } from '@/app/ui/layout/section'
import { ButtonLink } from '@/app/ui/primitives/button'
import { DataTable } from '@/app/ui/primitives/data-table'
import { countPlaces } from '@/lib/domain/study-plan'
import { paths } from '@/lib/web/paths'
import { AskedTable } from '../asked-table'
import { loadStudy } from '../load-study'
import { StudyFrame } from '../study-frame'

export const metadata: Metadata = { title: 'Materials' }

export default async function MaterialsPage({ params }: { params: Promise<{ studyId: string }> }) {
  const { studyId } = await params
  const { actor, view } = await loadStudy(studyId)
  const { study, layout } = view
  const isDraft = study.state === 'draft'

  return (
    <StudyFrame
      view={view}
      actor={actor}
      station="materials"
      title="Materials"
      lead={`Each laboratory returns ${countPlaces(layout)} results.`}
      actions={
        isDraft && (
          <ButtonLink href={`${paths.station(studyId, 'plan')}#field-materials`}>
            Change the materials
          </ButtonLink>
        )
      }
      margin={
        <>
          <MarginNote title="One even lot">
            <p>
              Every laboratory tests specimens of the same lot, so that what differs is the laboratory and not
              the specimen.
            </p>
          </MarginNote>
          <MarginNote title="Kits">
            <p>
              Dividing, labelling and sending specimens is outside this version of Evenlot. Laboratories see
              the materials in this order.
            </p>
          </MarginNote>
        </>
      }
    >
      <Section title="The lots">
        <DataTable
          caption="Materials"
          isCaptionHidden
          rows={layout.materials.map((material, index) => ({ ...material, number: index + 1 }))}
          rowKey={({ materialId }) => materialId}
          columns={[
            { key: 'number', header: 'No.', kind: 'figure', cell: ({ number }) => number },
            { key: 'name', header: 'Material', isRowHeader: true, cell: ({ name }) => name },
            { key: 'description', header: 'Description', cell: ({ description }) => description || '–' },
          ]}
        />
      </Section>
      <Section title="What is asked of each laboratory">
        <AskedTable layout={layout} />
      </Section>
    </StudyFrame>
  )
}
