'use client'

import { useActionState, type ReactNode } from 'react'
import { SubmitButton } from '@/app/ui/primitives/submit-button'
import type { ButtonVariant } from '@/app/ui/primitives/button'
import { untouchedForm } from '@/lib/web/form-state'
import type { FormAction } from './action-form'

interface PressFormProps {
  action: FormAction
  hidden: Readonly<Record<string, string>>
  pendingLabel: string
  variant?: ButtonVariant
  children: ReactNode
}

/** A single button that does one thing where it stands, and says there what came of it. */
export function PressForm({ action, hidden, pendingLabel, variant = 'plain', children }: PressFormProps) {
  const [state, formAction] = useActionState(action, untouchedForm)
  const said = state.message ?? Object.values(state.errors).flat()[0]
  return (
    <form action={formAction}>
      {Object.entries(hidden).map(([name, value]) => (
        <input key={name} type="hidden" name={name} value={value} />
      ))}
      <SubmitButton variant={variant} pendingLabel={pendingLabel}>
        {children}
      </SubmitButton>
      <p
        role="status"
        className={
          said
            ? 'mt-1 max-w-64 whitespace-normal text-small text-madder'
            : 'max-w-64 whitespace-normal text-small text-moss'
        }
      >
        {said ?? state.ok}
      </p>
    </form>
  )
}
