import Link from 'next/link'
import clsx from 'clsx'
import type { ComponentProps, ReactNode } from 'react'

export type ButtonVariant = 'primary' | 'plain' | 'destructive'

interface ButtonLook {
  variant?: ButtonVariant
  children: ReactNode
}

type ButtonProps = ButtonLook & { isPending?: boolean } & ComponentProps<'button'>

/** A button. While pending it keeps its place and focus, and refuses a second press. */
export function Button({
  variant = 'plain',
  isPending = false,
  type = 'button',
  className,
  children,
  ...rest
}: ButtonProps) {
  return (
    <button
      {...rest}
      type={type}
      aria-disabled={isPending || rest['aria-disabled'] || undefined}
      className={clsx(buttonLook(variant), className)}
    >
      {isPending && <Waiting />}
      {children}
    </button>
  )
}

type ButtonLinkProps = ButtonLook & { href: string } & Omit<ComponentProps<typeof Link>, 'href'>

/** A link that looks like a button: it goes somewhere, it changes nothing. */
export function ButtonLink({ variant = 'plain', className, children, ...rest }: ButtonLinkProps) {
  return (
    <Link {...rest} className={clsx(buttonLook(variant), className)}>
      {children}
    </Link>
  )
}

/** The dress of a button, for the few things that must be dressed as one without being one. */
export function buttonLook(variant: ButtonVariant): string {
  return clsx(
    'inline-flex min-h-9 items-center justify-center gap-2 rounded border px-3 py-1 text-center font-semibold leading-tight',
    'transition-colors duration-100 disabled:opacity-60 aria-disabled:opacity-60',
    variant === 'primary' &&
      'border-verdigris bg-verdigris text-paper hover:border-ink hover:bg-ink forced-colors:border-2 forced-colors:bg-[ButtonFace] forced-colors:text-[color:ButtonText]',
    variant === 'plain' && 'border-verdigris bg-transparent text-verdigris hover:bg-verdigris-wash',
    variant === 'destructive' && 'border-madder bg-transparent text-madder hover:bg-madder-wash',
  )
}

function Waiting() {
  return (
    <svg width="14" height="14" viewBox="0 0 14 14" aria-hidden="true" className="animate-spin">
      <path d="M7 1a6 6 0 1 1-6 6" fill="none" stroke="currentColor" strokeWidth="1.8" />
    </svg>
  )
}
