import type { ReactNode } from 'react'

interface EmptyStateProps {
  /** What is not here yet, as a sentence. */
  title: ReactNode
  /** What will bring it, and who does that. */
  children?: ReactNode
  action?: ReactNode
}

export function EmptyState({ title, children, action }: EmptyStateProps) {
  return (
    <div className="flex flex-col items-start gap-3 border border-dashed border-edge px-5 py-6">
      <div className="max-w-text">
        <p className="font-semibold">{title}</p>
        {children && <div className="mt-0.5 text-ink-soft">{children}</div>}
      </div>
      {action}
    </div>
  )
}
