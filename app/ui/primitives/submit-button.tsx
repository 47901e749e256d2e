'use client'

import type { ComponentProps } from 'react'
import { useFormStatus } from 'react-dom'
import { Button } from './button'

type SubmitButtonProps = ComponentProps<typeof Button> & {
  /** What the button says while its form is under way, such as 'Sending…'. */
  pendingLabel?: string
}

/** The submit of a form. Without scripts it is an ordinary one; with them it shows that the form is under way. */
export function SubmitButton({
  variant = 'primary',
  pendingLabel,
  children,
  onClick,
  ...rest
}: SubmitButtonProps) {
  const { pending } = useFormStatus()
  return (
    <Button
      {...rest}
      type="submit"
      variant={variant}
      isPending={pending}
      onClick={(event) => {
        // Not `disabled`, which would throw the focus away; a second press is simply not let through.
        if (pending) event.preventDefault()
        else onClick?.(event)
      }}
    >
      <span aria-live="polite">{pending && pendingLabel ? pendingLabel : children}</span>
    </Button>
  )
}
