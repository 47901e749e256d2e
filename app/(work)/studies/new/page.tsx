import type { Metadata } from 'next'
import { notFound } from 'next/navigation'
import { MarginNote } from '@/app/ui/layout/margin'
import { PageShell } from '@/app/ui/layout/page-shell'
import { emptyPlan } from '@/lib/domain/begin-plan'
import { listZones } from '@/lib/domain/list-zones'
import { listStudies } from '@/lib/use-cases/studies/list-studies'
import { requestContext, requireActor } from '@/lib/web/request-context'
import { WorkTopBar } from '../../work-top-bar'
import { NewStudyForm } from './new-study-form'
import { createStudyAction } from './actions'

export const metadata: Metadata = { title: 'Open a new study' }

export default async function NewStudyPage({
  searchParams,
}: {
  searchParams: Promise<{ organisation?: string | string[] }>
}) {
  const actor = await requireActor()
  const { organisation } = await searchParams
  const { mayCreateIn } = await listStudies(await requestContext())
  if (mayCreateIn.length === 0) notFound()

  return (
    <PageShell
      top={<WorkTopBar actor={actor} current="studies" />}
      kicker="Studies"
      title="Open a new study"
      lead="A new study is a draft. Nobody is written to until you send the invitations, and everything here can be changed until then."
      margin={
        <>
          <MarginNote title="What happens next">
            <p>You name the laboratories and, if you wish, a committee. Then you send the invitations.</p>
          </MarginNote>
          <MarginNote title="What cannot change later">
            <p>
              Once laboratories are asked, the measurands, materials and levels stand as they are. The
              deadline can still be moved.
            </p>
          </MarginNote>
          <MarginNote title="How results are counted">
            <p>
              Measurands × materials × each level within a laboratory: so many single results does one
              laboratory return.
            </p>
          </MarginNote>
        </>
      }
    >
      <NewStudyForm
        action={createStudyAction}
        organisations={mayCreateIn}
        chosen={[organisation].flat()[0]}
        begun={emptyPlan}
        zones={listZones()}
      />
    </PageShell>
  )
}
