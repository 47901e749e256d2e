import { Notice } from '@/app/ui/primitives/notice'
import type { TrailView } from '@/lib/use-cases/trail/read-trail'

/** Whether the chain holds, and by which digest it can be known again. */
export function TrailVerdict({
  verdict,
  head,
  count,
}: Pick<TrailView, 'verdict' | 'head'> & { count: number }) {
  if (verdict)
    return (
      <Notice tone="danger" title={`The chain breaks at entry ${verdict.sequence}: ${verdict.reason}.`}>
        <p>
          What stands after it cannot be relied on. Tell whoever runs this service before anything else is
          decided.
        </p>
      </Notice>
    )
  return (
    <Notice
      tone="done"
      word="Verified"
      title={`the chain of ${count} ${count === 1 ? 'entry' : 'entries'} holds`}
    >
      {head && (
        <p>
          Head <span className="break-all font-mono text-small">{head}</span>
        </p>
      )}
    </Notice>
  )
}
