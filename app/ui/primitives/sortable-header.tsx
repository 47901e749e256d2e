import Link from 'next/link'
import type { ReactNode } from 'react'

export interface Sort {
  /** The address that sorts by this column, or turns its order round. */
  href: string
  direction?: 'ascending' | 'descending'
}

/** A column's header as a link, so that sorting works without scripts and can be sent to someone. */
export function SortableHeader({ sort, children }: { sort: Sort; children: ReactNode }) {
  return (
    <Link
      href={sort.href}
      scroll={false}
      className="inline-flex min-h-9 items-center gap-1.5 underline-offset-4 hover:text-ink hover:underline"
    >
      {children}
      <svg width="8" height="12" viewBox="0 0 8 12" aria-hidden="true">
        <path
          d="M4 0.8L7.2 4.6H0.8Z"
          fill={sort.direction === 'ascending' ? 'currentColor' : 'none'}
          stroke="currentColor"
          strokeWidth="0.9"
        />
        <path
          d="M4 11.2L7.2 7.4H0.8Z"
          fill={sort.direction === 'descending' ? 'currentColor' : 'none'}
          stroke="currentColor"
          strokeWidth="0.9"
        />
      </svg>
    </Link>
  )
}
