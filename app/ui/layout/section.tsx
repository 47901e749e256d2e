import type { ReactNode } from 'react'

interface SectionProps {
  title: ReactNode
  /** A line under the heading: the deadline, the unit, how many. */
  note?: ReactNode
  actions?: ReactNode
  id?: string
  children: ReactNode
}

/** A part of a page under its own heading. */
export function Section({ title, note, actions, id, children }: SectionProps) {
  return (
    <section id={id} className="min-w-0">
      <div className="mb-2.5 flex flex-wrap items-end justify-between gap-x-6 gap-y-2">
        <div>
          <h2 className="font-heading text-lead font-bold">{title}</h2>
          {note && <p className="text-small text-ink-soft">{note}</p>}
        </div>
        {actions && (
          <div className="flex flex-wrap gap-x-4 gap-y-2" data-screen-only>
            {actions}
          </div>
        )}
      </div>
      {children}
    </section>
  )
}
