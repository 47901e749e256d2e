import clsx from 'clsx'
import type { ReactNode } from 'react'
import { buttonLook, type ButtonVariant } from './button'

interface ConfirmProps {
  /** What the first button says, such as 'Withdraw the report'. */
  label: ReactNode
  variant?: ButtonVariant
  /** What will happen and to whom, before it does. */
  consequence: ReactNode
  /** The form that does it. */
  children: ReactNode
}

/** A second step before something that cannot be taken back. A details element: it opens by keyboard and without scripts. */
export function Confirm({ label, variant = 'destructive', consequence, children }: ConfirmProps) {
  const isDestructive = variant === 'destructive'
  return (
    <details className="group">
      <summary className={clsx(buttonLook(variant), 'list-none [&::-webkit-details-marker]:hidden')}>
        {label}
        <svg width="10" height="7" viewBox="0 0 12 8" aria-hidden="true" className="group-open:rotate-180">
          <path d="M1 1l5 5 5-5" fill="none" stroke="currentColor" strokeWidth="1.8" />
        </svg>
      </summary>
      <div
        className={clsx(
          'mt-2 flex max-w-text flex-col items-start gap-3 border border-l-[3px] px-4 py-3',
          isDestructive ? 'border-madder bg-madder-wash' : 'border-verdigris bg-verdigris-wash',
        )}
      >
        <div>{consequence}</div>
        {children}
      </div>
    </details>
  )
}
