import type { Metadata } from 'next'
import Link from 'next/link'
import { PublicTopBar } from '../public-top-bar'
import { PageShell } from '@/app/ui/layout/page-shell'
import { DataTable } from '@/app/ui/primitives/data-table'
import { EmptyState } from '@/app/ui/primitives/empty-state'
import { showDay } from '@/lib/domain/show-time'
import { listPublications } from '@/lib/use-cases/publications/read-publications'
import { paths } from '@/lib/web/paths'
import { readerContext } from '@/lib/web/reader-context'

export const metadata: Metadata = { title: 'Published studies' }

export default async function PublishedPage({ searchParams }: PageProps<'/published'>) {
  const { q } = await searchParams
  const sought = typeof q === 'string' ? q.trim().toLowerCase() : ''
  const all = await listPublications(readerContext(null))
  const shown = all.filter(({ snapshot: { study } }) =>
    `${study.title} ${study.method} ${study.shortName} ${study.organisation}`.toLowerCase().includes(sought),
  )
  return (
    <PageShell
      top={<PublicTopBar current="published" />}
      title="Published studies"
      lead="Precision statements with their coded results. No laboratory is named."
    >
      <form className="flex flex-wrap items-end gap-3" role="search">
        <label className="flex flex-col gap-1 font-semibold" htmlFor="q">
          Search by title or method
          <input
            id="q"
            name="q"
            type="search"
            defaultValue={sought}
            className="min-h-9 w-72 max-w-full border border-edge bg-sheet px-2 font-normal"
          />
        </label>
        <button
          type="submit"
          className="min-h-9 rounded border border-verdigris px-3 font-semibold text-verdigris hover:bg-verdigris-wash"
        >
          Search
        </button>
      </form>
      <DataTable
        caption="Published studies"
        isCaptionHidden
        rows={shown}
        rowKey={({ slug }) => slug}
        empty={
          <EmptyState title={all.length === 0 ? 'Nothing is published yet' : 'No published study matches'}>
            {all.length === 0
              ? 'A study appears here once a second person has confirmed it.'
              : 'Try fewer letters.'}
          </EmptyState>
        }
        columns={[
          {
            key: 'title',
            header: 'Study',
            isRowHeader: true,
            cell: ({ slug, snapshot }) => (
              <Link href={paths.publication(slug)} className="prose-link inline-block min-h-6">
                {snapshot.study.title}
              </Link>
            ),
          },
          { key: 'short', header: 'Short name', cell: ({ snapshot }) => snapshot.study.shortName },
          { key: 'method', header: 'Method', cell: ({ snapshot }) => snapshot.study.method },
          {
            key: 'laboratories',
            header: 'Laboratories',
            kind: 'figure',
            cell: ({ snapshot }) => String(snapshot.measurands[0]?.document.input.laboratories ?? 0),
          },
          { key: 'on', header: 'Published', cell: ({ publishedOn }) => showDay(publishedOn, 'UTC') },
        ]}
      />
    </PageShell>
  )
}
