import type { Metadata } from 'next'
import { MeasurandTabs } from '@/app/ui/analysis/measurand-tabs'
import { PrecisionNotes } from '@/app/ui/analysis/precision-notes'
import { PublishedStudy } from '@/app/ui/analysis/published-study'
import { ReportContents } from '@/app/ui/analysis/report-contents'
import { MarginNote } from '@/app/ui/layout/margin'
import { PageShell } from '@/app/ui/layout/page-shell'
import { showDay } from '@/lib/domain/show-time'
import { readPublication } from '@/lib/use-cases/publications/read-publications'
import { orNotFound } from '@/lib/web/or-not-found'
import { paths } from '@/lib/web/paths'
import { readerContext } from '@/lib/web/reader-context'
import { PublicTopBar } from '../../public-top-bar'

export async function generateMetadata({ params }: PageProps<'/published/[slug]'>): Promise<Metadata> {
  const { slug } = await params
  const { snapshot } = await orNotFound(readPublication(readerContext(null), { slug }))
  return { title: snapshot.study.title }
}

export default async function PublicationPage({ params, searchParams }: PageProps<'/published/[slug]'>) {
  const { slug } = await params
  const { measurand } = await searchParams
  const { snapshot, publishedOn, digest } = await orNotFound(readPublication(readerContext(null), { slug }))
  const chosen = Math.max(0, Math.min(snapshot.measurands.length - 1, (Number(measurand) || 1) - 1))
  const tabs = snapshot.measurands.map(({ name, unit }, index) => ({
    measurandId: String(index + 1),
    name,
    unit,
  }))
  return (
    <PageShell
      top={<PublicTopBar current="published" />}
      kicker={`${snapshot.study.shortName} · ${snapshot.study.organisation} · published ${showDay(publishedOn, 'UTC')}`}
      title={snapshot.study.title}
      lead={snapshot.study.purpose || undefined}
      margin={
        <>
          <ReportContents />
          <PrecisionNotes limitFactor={snapshot.study.limitFactor} />
          <MarginNote title="This page is frozen">
            <p>
              It shows one snapshot, in which laboratories appear by code alone. Its digest is{' '}
              <span className="block break-all font-mono">{digest}</span>
            </p>
          </MarginNote>
          <MarginNote title="Before you test">
            <p>
              Handling and transport of a material follow its supplier’s safety data sheet, local rules and
              licensed practice. This page gives no advice on them.
            </p>
          </MarginNote>
        </>
      }
    >
      <MeasurandTabs measurands={tabs} chosen={String(chosen + 1)} />
      <PublishedStudy snapshot={snapshot} files={paths.publication(slug)} chosen={chosen} />
    </PageShell>
  )
}
