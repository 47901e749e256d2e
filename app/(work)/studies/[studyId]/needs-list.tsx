import clsx from 'clsx'
import { ButtonLink } from '@/app/ui/primitives/button'
import { EmptyState } from '@/app/ui/primitives/empty-state'
import { Tag } from '@/app/ui/primitives/tag'
import { ToneShape, toneText } from '@/app/ui/primitives/tone'
import type { Need } from '@/lib/domain/needs-today'
import { paths } from '@/lib/web/paths'

/** What waits for a person, each with the one action that settles it. */
export function NeedsList({
  studyId,
  needs,
  quiet,
}: {
  studyId: string
  needs: readonly Need[]
  quiet: string
}) {
  if (needs.length === 0) return <EmptyState title="Nothing needs anyone today">{quiet}</EmptyState>
  return (
    <ul className="border bg-sheet">
      {needs.map((need) => (
        <li
          key={need.key}
          className="grid items-center gap-x-6 gap-y-2 border-b px-4 py-3 last:border-b-0 sm:grid-cols-[9rem_minmax(0,1fr)_auto]"
        >
          <span className={clsx('flex items-center gap-1.5 text-small font-semibold', toneText[need.tone])}>
            <ToneShape tone={need.tone} />
            {need.when}
          </span>
          <p className="min-w-0">
            {need.code && (
              <>
                <Tag code={need.code} label="Laboratory" />{' '}
              </>
            )}
            {need.words}
          </p>
          <span data-screen-only>
            <ButtonLink
              href={addressOf(studyId, need)}
              variant={need.tone === 'danger' ? 'primary' : 'plain'}
            >
              {need.action.label}
              {need.code && <span className="sr-only"> of laboratory {need.code}</span>}
            </ButtonLink>
          </span>
        </li>
      ))}
    </ul>
  )
}

function addressOf(studyId: string, { action, code }: Need): string {
  const page = paths.station(studyId, action.station)
  if (!action.at) return page
  // A laboratory's own form is drawn on demand, so its code goes along in the address.
  return action.at === code ? `${page}?extend=${code}#extend` : `${page}#${action.at}`
}
