import type { Metadata } from 'next'
import { CodedDownloads } from '@/app/ui/analysis/coded-downloads'
import { ConsistencyPlots } from '@/app/ui/analysis/consistency-plots'
import { MeasurandTabs } from '@/app/ui/analysis/measurand-tabs'
import { OutlierTests } from '@/app/ui/analysis/outlier-tests'
import { PrecisionNotes } from '@/app/ui/analysis/precision-notes'
import { PrecisionReport } from '@/app/ui/analysis/precision-report'
import { ReportContents } from '@/app/ui/analysis/report-contents'
import { SetAsideTable } from '@/app/ui/analysis/set-aside-table'
import { MarginNote } from '@/app/ui/layout/margin'
import { PageShell } from '@/app/ui/layout/page-shell'
import { Section } from '@/app/ui/layout/section'
import { ButtonLink } from '@/app/ui/primitives/button'
import { EmptyState } from '@/app/ui/primitives/empty-state'
import { permittedRole } from '@/lib/domain/permissions'
import { readReview } from '@/lib/use-cases/reviews/read-review'
import { orNotFound } from '@/lib/web/or-not-found'
import { readerContext } from '@/lib/web/reader-context'
import { requireActor } from '@/lib/web/request-context'
import { WorkTopBar } from '../../work-top-bar'

export const metadata: Metadata = { title: 'Committee' }

export default async function CommitteePage({ params, searchParams }: PageProps<'/committee/[studyId]'>) {
  const actor = await requireActor()
  const { studyId } = await params
  const { measurand: asked } = await searchParams
  const review = await orNotFound(readReview(readerContext(actor), { studyId }))
  const { study, analysis } = review
  const measurand =
    analysis?.measurands.find(({ measurandId }) => measurandId === asked) ?? analysis?.measurands[0]
  const mayConfirm =
    study.state === 'in-review' && permittedRole(actor, 'publication.confirm', study) !== undefined

  return (
    <PageShell
      top={<WorkTopBar actor={actor} current="studies" />}
      kicker={`${study.shortName} · ${study.organisation} · ${study.method}`}
      title={study.title}
      lead={study.purpose || undefined}
      actions={
        mayConfirm ? (
          <ButtonLink href={`/committee/${studyId}/confirm`}>Proposal to publish</ButtonLink>
        ) : undefined
      }
      margin={
        <>
          {measurand && <ReportContents />}
          <MarginNote title="What is kept from this page">
            <p>
              Every laboratory appears by its code, drawn for this study alone. Who stands behind a code is
              known to the coordinators only.
            </p>
          </MarginNote>
          <PrecisionNotes limitFactor={study.limitFactor} />
        </>
      }
    >
      {!measurand || !analysis ? (
        <EmptyState title="Nothing to read yet">
          The coordinators put the study before the committee once returns are closed and scrutinised.
        </EmptyState>
      ) : (
        <>
          <MeasurandTabs measurands={analysis.measurands} chosen={measurand.measurandId} />
          <ConsistencyPlots document={measurand.document} />
          <Section
            id="outlier-tests"
            title="Outlier tests"
            note="A test proposes; a person decides. Pairs are consulted only where neither end alone is an outlier."
          >
            <OutlierTests document={measurand.document} />
          </Section>
          <Section id="set-aside" title="Cells set aside" note="By the coordinators, each with the reason.">
            <SetAsideTable cells={measurand.exclusions} />
          </Section>
          <PrecisionReport measurand={measurand} />
          <Section
            id="recompute"
            title="Recompute it"
            note={`Analysis ${analysis.number}, engine ${analysis.engineVersion}, digest ${analysis.digest.slice(0, 16)}…`}
          >
            <p className="flex flex-wrap gap-5">
              <CodedDownloads studyId={studyId} measurandId={measurand.measurandId} />
            </p>
          </Section>
        </>
      )}
    </PageShell>
  )
}
