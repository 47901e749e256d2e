import type { ReactNode } from 'react'

/** The notebook's margin: beside the work where there is room, under it where there is none. */
export function Margin({ children }: { children: ReactNode }) {
  return (
    <aside
      aria-label="In the margin"
      className="flex flex-col gap-5 text-small text-ink-soft max-margin:border-t max-margin:pt-5 margin:border-l margin:pl-6"
    >
      {children}
    </aside>
  )
}

/** One pencilled remark: how a figure came about, a decision that touches it, who acts next. */
export function MarginNote({ title, children }: { title: ReactNode; children: ReactNode }) {
  return (
    <section
      className="max-w-text [&_a]:text-verdigris [&_a]:underline [&_a]:underline-offset-[0.18em]"
      data-kept-whole
    >
      <h2 className="mb-1 flex flex-wrap items-center gap-x-2 gap-y-1 font-semibold text-ink">{title}</h2>
      <div className="flex flex-col gap-2">{children}</div>
    </section>
  )
}
