import type { Metadata } from 'next'
import { MarginNote } from '@/app/ui/layout/margin'
import { PageShell } from '@/app/ui/layout/page-shell'
import { ButtonLink } from '@/app/ui/primitives/button'
import { arrangeStudies, readStudiesWish } from '@/lib/domain/arrange-studies'
import { listStudies } from '@/lib/use-cases/studies/list-studies'
import { paths } from '@/lib/web/paths'
import { requestContext, requireActor } from '@/lib/web/request-context'
import { WorkTopBar } from '../work-top-bar'
import { StudiesFilter } from './studies-filter'
import { StudiesTable } from './studies-table'

export const metadata: Metadata = { title: 'Studies' }

interface StudiesPageProps {
  searchParams: Promise<Record<string, string | string[] | undefined>>
}

export default async function StudiesPage({ searchParams }: StudiesPageProps) {
  const actor = await requireActor()
  const wish = readStudiesWish(await searchParams)
  const { now, entries, mayCreateIn } = await listStudies(await requestContext())
  const shown = arrangeStudies(entries, { ...wish, now })
  const mayCreate = mayCreateIn.length > 0

  return (
    <PageShell
      top={<WorkTopBar actor={actor} current="studies" />}
      title="Studies"
      lead="Every study you have to do with. Those that need someone today come first."
      actions={
        mayCreate && (
          <ButtonLink href={paths.newStudy()} variant="primary">
            Open a new study
          </ButtonLink>
        )
      }
      margin={
        <>
          <MarginNote title="In which capacity">
            <p>
              A study stands here once for each capacity in which you read it: as its coordinator, for a
              laboratory, or on its committee. Each leads to its own page.
            </p>
          </MarginNote>
          <MarginNote title="Times">
            <p>
              Each deadline is shown in the zone in which its coordinator set it, and decided by the clock of
              the database.
            </p>
          </MarginNote>
        </>
      }
    >
      {entries.length > 0 && <StudiesFilter wish={wish} shown={shown.length} all={entries.length} />}
      <StudiesTable
        entries={shown}
        wish={wish}
        now={now}
        isAll={shown.length === entries.length}
        mayCreate={mayCreate}
      />
    </PageShell>
  )
}
