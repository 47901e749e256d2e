import type { ReactNode } from 'react'
import { Margin } from './margin'
import { PageHeader } from './page-header'

interface PageShellProps {
  top: ReactNode
  kicker?: ReactNode
  title: ReactNode
  lead?: ReactNode
  actions?: ReactNode
  course?: ReactNode
  /** Margin notes; without any, the content keeps its measure and the margin stays away. */
  margin?: ReactNode
  children: ReactNode
}

/** Every page: the bar, its title, the course of the study, then the work with its margin. */
export function PageShell({ top, kicker, title, lead, actions, course, margin, children }: PageShellProps) {
  return (
    <>
      {top}
      <main id="content" tabIndex={-1} className="mx-auto max-w-sheet px-4 pb-16 pt-6 sm:px-6 lg:px-10">
        <PageHeader kicker={kicker} title={title} lead={lead} actions={actions} />
        {course && <div className="mt-5">{course}</div>}
        {margin ? (
          <div className="mt-7 grid gap-x-12 gap-y-10 margin:grid-cols-[minmax(0,1fr)_16.5rem]">
            <div className="flex min-w-0 flex-col gap-8">{children}</div>
            <Margin>{margin}</Margin>
          </div>
        ) : (
          <div className="mt-7 flex min-w-0 flex-col gap-8">{children}</div>
        )}
      </main>
    </>
  )
}
