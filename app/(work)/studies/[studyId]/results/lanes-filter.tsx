import clsx from 'clsx'
import Link from 'next/link'
import type { Sort } from '@/app/ui/primitives/sortable-header'
import { laneSorts, type LaneSort, type LanesWish } from '@/lib/domain/arrange-lanes'
import type { ReturnsView } from '@/lib/use-cases/returns/watch-returns'
import { paths } from '@/lib/web/paths'

const states = ['late', 'not begun', 'in draft', 'returned'] as const

/** The states as links with their counts; each is an address that can be kept. */
export function LanesFilter({
  studyId,
  wish,
  lanes,
}: {
  studyId: string
  wish: LanesWish
  lanes: ReturnsView['lanes']
}) {
  const counts = states.map((state) => ({
    state,
    count: lanes.filter((lane) => lane.state === state).length,
  }))
  const choices = [{ state: null, count: lanes.length }, ...counts]
  return (
    <nav aria-label="Laboratories by state" data-screen-only>
      <ul className="flex flex-wrap gap-x-5 gap-y-1 text-small">
        {choices.map(({ state, count }) => (
          <li key={state ?? 'all'}>
            <Link
              href={addressOf(studyId, { ...wish, state })}
              scroll={false}
              aria-current={wish.state === state ? 'true' : undefined}
              className={clsx(
                'inline-block min-h-6',
                wish.state === state ? 'border-b-2 border-verdigris font-semibold' : 'prose-link',
              )}
            >
              {state ?? 'all'} {count}
            </Link>
          </li>
        ))}
      </ul>
    </nav>
  )
}

/** For each column the address that sorts by it, or turns its order round. */
export function sortAddresses(studyId: string, wish: LanesWish): Record<LaneSort, Sort> {
  const sorts = laneSorts.map((sort): [LaneSort, Sort] => {
    const isCurrent = wish.sort === sort
    const href = addressOf(studyId, { ...wish, sort, isReversed: isCurrent && !wish.isReversed })
    if (!isCurrent) return [sort, { href }]
    return [sort, { href, direction: wish.isReversed ? 'descending' : 'ascending' }]
  })
  return Object.fromEntries(sorts) as Record<LaneSort, Sort>
}

function addressOf(studyId: string, { state, sort, isReversed }: LanesWish): string {
  const query = new URLSearchParams({ ...(state ? { state } : {}), sort: isReversed ? `-${sort}` : sort })
  return `${paths.station(studyId, 'results')}?${query}`
}
