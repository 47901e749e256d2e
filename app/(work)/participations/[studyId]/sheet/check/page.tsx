import type { Metadata } from 'next'
import { redirect } from 'next/navigation'
import { LaboratoryPage } from '../../../laboratory-page'
import { namePlace } from '../../../name-place'
import { orNotFound } from '@/lib/web/or-not-found'
import { participationPaths } from '../../../participation-paths'
import { ClosedNotice } from '../../closed-notice'
import { ConfirmReturn } from '../../confirm-return'
import { ReportedTable } from '../../reported-table'
import { MarginNote } from '@/app/ui/layout/margin'
import { Section } from '@/app/ui/layout/section'
import { Notice } from '@/app/ui/primitives/notice'
import { listPlaces, placeKey } from '@/lib/spreadsheet/layout'
import { reviewSheet, type SheetReview } from '@/lib/use-cases/returns/review-sheet'
import { paths } from '@/lib/web/paths'
import { requestContext, requireActor } from '@/lib/web/request-context'
import { submitSheetAction } from './actions'

export const metadata: Metadata = { title: 'Check before returning' }

export default async function CheckPage({ params }: { params: Promise<{ studyId: string }> }) {
  const actor = await requireActor()
  const { studyId } = await params
  const review = await orNotFound(reviewSheet(await requestContext(), { studyId }))
  const { view, entries, remark, read, submissionKey } = review
  const last = view.receipts[0]
  // No draft: what stood here has been returned, from this page or from another one.
  if (!view.draft) redirect(last ? paths.receipt(studyId, last.number) : paths.resultSheet(studyId))
  if (read.problems.length > 0) redirect(participationPaths.sheetWithProblems(studyId))
  if (read.results.length === 0) redirect(paths.resultSheet(studyId))
  return (
    <LaboratoryPage
      actor={actor}
      view={view}
      title="Check before returning"
      lead={`${read.results.length} of ${view.places} results will be returned. Nothing has been returned yet.`}
      margin={<WhatFollows review={review} />}
    >
      <ClosedNotice view={view} />
      <Findings review={review} />
      <Section title="What will be returned">
        <ReportedTable layout={view.layout} texts={entries} caption="Results as they will be returned" />
      </Section>
      <ConfirmReturn
        fields={{
          studyId,
          submissionKey,
          checked: JSON.stringify(listPlaces(view.layout).map((place) => entries[placeKey(place)] ?? '')),
        }}
        remark={remark}
        missing={read.missing.length}
        canReturn={view.canReturn}
        back={{ href: paths.resultSheet(studyId), words: 'Back to the sheet' }}
        action={submitSheetAction}
      />
    </LaboratoryPage>
  )
}

function WhatFollows({ review: { view } }: { review: SheetReview }) {
  const last = view.receipts[0]
  return (
    <MarginNote title="What happens next">
      <p>
        You get a receipt with a number, here and by mail.{' '}
        {last ? `This return takes the place of receipt ${last.receiptNumber}. ` : ''}
        Until the deadline a return can be replaced by a later one.
      </p>
    </MarginNote>
  )
}

function Findings({ review: { view, read } }: { review: SheetReview }) {
  const censored = read.results.filter((result) => result.censored).length
  return (
    <>
      {read.missing.length > 0 && (
        <Notice tone="warn" title={`${countOf(read.missing.length)} missing; say why in the remark below`}>
          <PlaceList names={read.missing.map((place) => namePlace(view.layout, place))} />
        </Notice>
      )}
      {read.coarse.length > 0 && (
        <Notice
          tone="info"
          title={`${countOf(read.coarse.length)} given with fewer decimals than the method asks for`}
        >
          <PlaceList names={read.coarse.map((place) => namePlace(view.layout, place))} />
          <p>They are taken as they are. Go back if your laboratory has more digits.</p>
        </Notice>
      )}
      {censored > 0 && (
        <Notice
          tone="info"
          title={`${countOf(censored)} given as below or above a limit, and kept as such`}
        />
      )}
    </>
  )
}

const mostNamed = 8

function PlaceList({ names }: { names: readonly string[] }) {
  const more = names.length - mostNamed
  return (
    <p>
      {names.slice(0, mostNamed).join('; ')}
      {more > 0 ? `; and ${more} more.` : '.'}
    </p>
  )
}

function countOf(count: number): string {
  return count === 1 ? 'One result is' : `${count} results are`
}
