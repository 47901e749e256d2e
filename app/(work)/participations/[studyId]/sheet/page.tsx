import type { Metadata } from 'next'
import { orNotFound } from '@/lib/web/or-not-found'
import { LaboratoryPage } from '../../laboratory-page'
import { entryName } from '../../entry-names'
import { namePlace } from '../../name-place'
import { participationPaths } from '../../participation-paths'
import { ClosedNotice } from '../closed-notice'
import { ReportedTable } from '../reported-table'
import { DownloadLink } from '@/app/ui/primitives/download-link'
import { MarginNote } from '@/app/ui/layout/margin'
import { listPlaces, placeKey } from '@/lib/spreadsheet/layout'
import { reviewSheet, type SheetReview } from '@/lib/use-cases/returns/review-sheet'
import { requestContext, requireActor } from '@/lib/web/request-context'
import { checkSheetAction } from './actions'
import { ResultSheet } from './result-sheet'

export const metadata: Metadata = { title: 'Results' }

interface PageProps {
  params: Promise<{ studyId: string }>
  searchParams: Promise<{ look?: string }>
}

export default async function SheetPage({ params, searchParams }: PageProps) {
  const actor = await requireActor()
  const { studyId } = await params
  const { look } = await searchParams
  const review = await orNotFound(reviewSheet(await requestContext(), { studyId }))
  const { view, entries, remark, draftVersion } = review
  const places = listPlaces(view.layout)
  // A sheet that leads nowhere is not offered for typing; after the deadline alone, more time may still be given.
  const isOver = view.whyNot === 'not-open'
  return (
    <LaboratoryPage
      actor={actor}
      view={view}
      title="Results"
      lead={
        isOver
          ? 'As they were entered.'
          : 'Type each value with the digits your laboratory would give, with a decimal point or a comma.'
      }
      margin={isOver ? undefined : <SheetNotes studyId={studyId} />}
    >
      <ClosedNotice view={view} />
      {isOver ? (
        <ReportedTable layout={view.layout} texts={entries} caption="What was entered" />
      ) : (
        <ResultSheet
          studyId={studyId}
          code={view.code}
          zone={view.zone}
          returns={view.receipts.length}
          layout={view.layout}
          entries={places.map((place) => entries[placeKey(place)] ?? '')}
          remark={remark}
          draftVersion={draftVersion}
          draftSavedAt={view.draft?.savedAt.toISOString() ?? null}
          due={`Due ${view.due.text} in ${view.due.zoneText}, ${view.dueDistance}.`}
          problems={look === 'problems' ? listProblems(review) : []}
          action={checkSheetAction}
        />
      )}
    </LaboratoryPage>
  )
}

function SheetNotes({ studyId }: { studyId: string }) {
  return (
    <>
      <MarginNote title="Like a sheet">
        <p>
          Arrows and Enter move, F2 edits, Escape takes a change back, Tab leaves. A block copied from a
          spreadsheet can be pasted.
        </p>
      </MarginNote>
      <MarginNote title="What to write">
        <p>
          Below or above what your method can measure, write &lt; or &gt; before the number. Leave a place
          empty where there is no result, and say why in the remark.
        </p>
        <p>
          <DownloadLink href={participationPaths.filledWorkbookHandler(studyId)} format="XLSX">
            The sheet as a workbook
          </DownloadLink>
        </p>
      </MarginNote>
    </>
  )
}

function listProblems({ view: { layout }, read }: SheetReview): { field: string; message: string }[] {
  const places = listPlaces(layout)
  const position = new Map(places.map((place, index) => [placeKey(place), index]))
  return read.problems.map(({ key, message }) => {
    const at = position.get(key) ?? 0
    return { field: entryName(at), message: `${places[at] ? namePlace(layout, places[at]) : ''}: ${message}` }
  })
}
