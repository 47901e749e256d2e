import { DataTable } from '@/app/ui/primitives/data-table'
import { EmptyState } from '@/app/ui/primitives/empty-state'
import { Status } from '@/app/ui/primitives/status'
import { Time } from '@/app/ui/primitives/time'
import { describeAuditEntry, type TrailWords } from '@/lib/domain/describe-audit-entry'
import { showTime } from '@/lib/domain/show-time'
import type { TrailView } from '@/lib/use-cases/trail/read-trail'

interface TrailTableProps {
  entries: TrailView['entries']
  words: TrailWords
  /** The entry at which the chain breaks. */
  broken: number | undefined
}

export function TrailTable({ entries, words, broken }: TrailTableProps) {
  return (
    <DataTable
      caption="Audit trail"
      isCaptionHidden
      rows={entries}
      rowKey={({ sequence }) => String(sequence)}
      empty={
        <EmptyState title="Nothing is recorded here">
          The first decision in the study begins its trail.
        </EmptyState>
      }
      columns={[
        {
          key: 'sequence',
          header: 'No.',
          kind: 'figure',
          isRowHeader: true,
          cell: ({ sequence }) => sequence,
        },
        {
          key: 'at',
          header: 'When',
          cell: ({ at }) => {
            const { text, iso } = showTime(at, words.zone)
            return <Time at={iso} text={text} />
          },
        },
        {
          key: 'what',
          header: 'What',
          cell: (entry) => (
            <span className="block min-w-64 max-w-text">
              {describeAuditEntry(entry, words)}
              {entry.sequence === broken && (
                <>
                  {' '}
                  <Status tone="danger">the chain breaks here</Status>
                </>
              )}
            </span>
          ),
        },
        {
          key: 'hash',
          header: 'Digest',
          cell: ({ hash }) => (
            <span className="font-mono text-ink-soft" title={hash}>
              {hash.slice(0, 12)}
            </span>
          ),
        },
      ]}
    />
  )
}
