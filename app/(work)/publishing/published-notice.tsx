import Link from 'next/link'
import { Notice } from '@/app/ui/primitives/notice'
import { showTime } from '@/lib/domain/show-time'
import type { ReportView } from '@/lib/use-cases/publications/read-report'
import { paths } from '@/lib/web/paths'

/** Says that a study is published, by which two people, and where. */
export function PublishedNotice({ publication }: { publication: NonNullable<ReportView['publication']> }) {
  const { proposer, confirmer, confirmedAt, slug } = publication
  return (
    <Notice tone="done" title="Published">
      <p>
        Proposed by {proposer}, confirmed by {confirmer} on {showTime(confirmedAt, 'UTC').text} UTC.{' '}
        <Link href={paths.publication(slug)} className="prose-link">
          Read the published page
        </Link>
      </p>
    </Notice>
  )
}
