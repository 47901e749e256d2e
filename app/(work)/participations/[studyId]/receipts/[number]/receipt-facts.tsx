import type { ReactNode } from 'react'
import { Time } from '@/app/ui/primitives/time'
import { showTime } from '@/lib/domain/show-time'
import type { ReceiptView } from '@/lib/use-cases/returns/read-receipt'
import { OwnTime } from '../../../own-time'

/** The facts of a receipt, so that either side can show later what was sent and when. */
export function ReceiptFacts({ shown: { view, receipt, rows } }: { shown: ReceiptView }) {
  const utc = showTime(receipt.receivedAt, 'UTC')
  return (
    <dl
      className="grid grid-cols-[9rem_minmax(0,1fr)] gap-x-5 gap-y-2 max-sm:grid-cols-1 max-sm:gap-y-0.5"
      data-kept-whole
    >
      <Fact name="Receipt number">
        <span className="font-mono font-semibold">{receipt.receiptNumber}</span>
      </Fact>
      <Fact name="Study">
        {view.study.shortName}, {view.study.title}
      </Fact>
      <Fact name="Received">
        <OwnTime at={receipt.receivedAt} zone={view.zone} />, which is{' '}
        <Time at={utc.iso} text={`${utc.text} UTC`} />
      </Fact>
      <Fact name="Return">
        number {receipt.number}, {receipt.source === 'file' ? 'by workbook' : 'on the sheet'}
      </Fact>
      <Fact name="Results">
        {rows.length} of {view.places}
      </Fact>
      {receipt.remark && <Fact name="Remark">{receipt.remark}</Fact>}
      <Fact name="Digest">
        <span className="break-all font-mono text-small">{receipt.bodyDigest}</span>
        <span className="block text-small text-ink-soft">
          SHA-256 of what was received. It changes if one digit does.
        </span>
      </Fact>
    </dl>
  )
}

function Fact({ name, children }: { name: string; children: ReactNode }) {
  return (
    <>
      <dt className="text-ink-soft">{name}</dt>
      <dd className="max-sm:mb-2">{children}</dd>
    </>
  )
}
