import type { ReactNode } from 'react'

interface PageHeaderProps {
  /** What the page belongs to, in small letters above its title: the study and its measurand. */
  kicker?: ReactNode
  title: ReactNode
  lead?: ReactNode
  /** The page's own actions, at its right. */
  actions?: ReactNode
}

export function PageHeader({ kicker, title, lead, actions }: PageHeaderProps) {
  return (
    <div className="flex flex-wrap items-end justify-between gap-x-8 gap-y-3">
      <div className="min-w-0">
        {kicker && <p className="text-small text-ink-soft">{kicker}</p>}
        <h1 className="font-heading text-page font-bold tracking-[-0.01em]">{title}</h1>
        {lead && <p className="mt-1.5 max-w-text text-base text-ink-soft">{lead}</p>}
      </div>
      {actions && (
        <div className="flex flex-wrap gap-2" data-screen-only>
          {actions}
        </div>
      )}
    </div>
  )
}
