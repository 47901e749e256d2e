import { DataTable } from '@/app/ui/primitives/data-table'
import { Status } from '@/app/ui/primitives/status'
import type { ParticipationView } from '@/lib/use-cases/returns/read-participation'
import { paths } from '@/lib/web/paths'
import { OwnTime } from '../own-time'

/** The returns of this laboratory, the latest first, each leading to its receipt. */
export function ReceiptList({ view: { studyId, receipts, zone } }: { view: ParticipationView }) {
  return (
    <DataTable
      caption="Returns of this laboratory"
      isCaptionHidden
      rows={receipts}
      rowKey={({ returnId }) => returnId}
      columns={[
        {
          key: 'receipt',
          header: 'Receipt',
          isRowHeader: true,
          cell: ({ number, receiptNumber }) => (
            <a
              href={paths.receipt(studyId, number)}
              className="prose-link inline-block min-h-6 whitespace-nowrap font-mono"
            >
              {receiptNumber}
            </a>
          ),
        },
        {
          key: 'received',
          header: 'Received',
          cell: ({ receivedAt }) => <OwnTime at={receivedAt} zone={zone} />,
        },
        { key: 'source', header: 'By', cell: ({ source }) => (source === 'file' ? 'workbook' : 'sheet') },
        {
          key: 'state',
          header: 'State',
          cell: ({ number }) =>
            number === receipts[0]?.number ? (
              <Status tone="done">counts</Status>
            ) : (
              <Status tone="quiet">replaced</Status>
            ),
        },
      ]}
    />
  )
}
