import type { Metadata } from 'next'
import { notFound } from 'next/navigation'
import { MarginNote } from '@/app/ui/layout/margin'
import { Section } from '@/app/ui/layout/section'
import { DownloadLink } from '@/app/ui/primitives/download-link'
import { Notice } from '@/app/ui/primitives/notice'
import { placeKey } from '@/lib/spreadsheet/layout'
import { readReceipt } from '@/lib/use-cases/returns/read-receipt'
import { paths } from '@/lib/web/paths'
import { requestContext, requireActor } from '@/lib/web/request-context'
import { LaboratoryPage } from '../../../laboratory-page'
import { orNotFound } from '@/lib/web/or-not-found'
import { participationPaths } from '../../../participation-paths'
import { ReportedTable } from '../../reported-table'
import { ForgetCopies } from './forget-copies'
import { ReceiptFacts } from './receipt-facts'

export const metadata: Metadata = { title: 'Receipt' }

export default async function ReceiptPage({
  params,
}: {
  params: Promise<{ studyId: string; number: string }>
}) {
  const actor = await requireActor()
  const { studyId, number } = await params
  if (!/^[1-9]\d{0,5}$/.test(number)) notFound()
  const shown = await orNotFound(readReceipt(await requestContext(), { studyId, number: Number(number) }))
  const { view, receipt, rows, file } = shown
  const isLatest = view.receipts[0]?.number === receipt.number
  return (
    <LaboratoryPage
      actor={actor}
      view={view}
      title={
        <>
          Receipt <span className="whitespace-nowrap">{receipt.receiptNumber}</span>
        </>
      }
      margin={
        <MarginNote title="What happens next">
          <p>
            A mail tells you of this receipt. When returns close, the coordinator has the statistics computed
            and may ask about a single value. What is published names no laboratory.
          </p>
          {view.canReturn && (
            <p>
              Until the deadline you can replace this return:{' '}
              <a href={paths.resultSheet(studyId)}>open the sheet</a> or{' '}
              <a href={paths.resultUpload(studyId)}>send a workbook</a>.
            </p>
          )}
        </MarginNote>
      }
    >
      {isLatest ? (
        <Notice tone="done" title={`${rows.length} of ${view.places} results were received`} />
      ) : (
        <Notice tone="info" title="A later return has taken the place of this one">
          <a className="prose-link" href={paths.receipt(studyId, view.receipts[0]?.number ?? number)}>
            See receipt {view.receipts[0]?.receiptNumber}
          </a>
        </Notice>
      )}
      <ReceiptFacts shown={shown} />
      {file && (
        <Section title="The file" note={`SHA-256 ${file.sha256}`}>
          <DownloadLink
            href={participationPaths.fileHandler(studyId, receipt.uploadId ?? '')}
            format={`${Math.ceil(file.size / 1024)} kB`}
          >
            {file.fileName}
          </DownloadLink>
        </Section>
      )}
      <Section title="What was received">
        <ReportedTable
          layout={view.layout}
          texts={Object.fromEntries(rows.map((row) => [placeKey(row), row.text]))}
          caption={`Results of receipt ${receipt.receiptNumber}`}
        />
      </Section>
      <ForgetCopies studyId={studyId} isLatest={isLatest} />
    </LaboratoryPage>
  )
}
