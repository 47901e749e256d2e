import Link from 'next/link'
import clsx from 'clsx'

type StationPhase = 'done' | 'current' | 'open' | 'later'

export interface Station {
  name: string
  /** A word or a count: 'settled', '9 of 12'. */
  state: string
  href?: string
  phase: StationPhase
}

const bars: Record<StationPhase, string> = {
  done: 'border-moss',
  current: 'border-verdigris',
  open: 'border-ink-soft',
  later: 'border-rule',
}

/**
 * The nine stations of a study. On one line where they fit; else the current one with a strip of all nine,
 * which unfolds into a list. It is a details element, so it folds by keyboard and without scripts.
 */
export function Course({ stations }: { stations: readonly Station[] }) {
  const currentIndex = stations.findIndex((station) => station.phase === 'current')
  const current = stations[currentIndex]

  return (
    <nav aria-label="Course of the study">
      <ol className="hidden border-b lg:flex">
        {stations.map((station) => (
          <li
            key={station.name}
            className={clsx(
              'min-w-0 flex-1 border-t-[3px]',
              bars[station.phase],
              station.phase === 'current' && '-mb-px border-x border-x-rule bg-sheet',
            )}
          >
            <StationLink station={station} className="h-full px-2 pb-2.5 pt-2 margin:px-3" />
          </li>
        ))}
      </ol>

      <details className="group border bg-sheet lg:hidden">
        <summary className="flex min-h-12 list-none flex-col gap-2 px-3 py-2.5 [&::-webkit-details-marker]:hidden">
          <span aria-hidden="true" className="flex gap-1">
            {stations.map((station) => (
              <span key={station.name} className={clsx('flex-1 border-t-[3px]', bars[station.phase])} />
            ))}
          </span>
          <span className="flex items-baseline justify-between gap-3">
            <span>
              <span className="font-semibold text-verdigris">{current?.name ?? 'All stations'}</span>
              {current && <span className="text-small text-ink-soft"> · {current.state}</span>}
            </span>
            <span className="whitespace-nowrap text-small text-ink-soft">
              {current && `${currentIndex + 1} of ${stations.length}`}
              <svg
                width="12"
                height="8"
                viewBox="0 0 12 8"
                aria-hidden="true"
                className="ml-2 inline group-open:rotate-180"
              >
                <path d="M1 1l5 5 5-5" fill="none" stroke="currentColor" strokeWidth="1.6" />
              </svg>
            </span>
          </span>
        </summary>
        <ol className="border-t py-1">
          {stations.map((station) => (
            <li key={station.name} className={clsx('border-l-[3px]', bars[station.phase])}>
              <StationLink station={station} className="px-3 py-1.5" />
            </li>
          ))}
        </ol>
      </details>
    </nav>
  )
}

function StationLink({ station, className }: { station: Station; className: string }) {
  const isCurrent = station.phase === 'current'
  const content = (
    <>
      <span
        className={clsx(
          'block font-semibold lg:text-small margin:text-base',
          isCurrent ? 'text-verdigris' : 'text-ink',
          station.href && 'group-hover/station:underline',
        )}
      >
        {station.name}
      </span>
      <span className="block text-small text-ink-soft">
        {station.phase === 'done' && <Tick />}
        {station.state}
      </span>
    </>
  )
  if (!station.href) {
    return (
      <span className={clsx('block', className)} aria-current={isCurrent ? 'step' : undefined}>
        {content}
      </span>
    )
  }
  return (
    <Link
      href={station.href}
      aria-current={isCurrent ? 'step' : undefined}
      className={clsx('group/station block underline-offset-4', className)}
    >
      {content}
    </Link>
  )
}

// Done is told by a shape too: a green bar alone says nothing to an eye that sees no green.
function Tick() {
  return (
    <svg
      width="11"
      height="9"
      viewBox="0 0 11 9"
      className="mr-1 inline text-moss"
      role="img"
      aria-label="done,"
    >
      <path d="M1 4.5l3 3 6-6.5" fill="none" stroke="currentColor" strokeWidth="1.7" />
    </svg>
  )
}
