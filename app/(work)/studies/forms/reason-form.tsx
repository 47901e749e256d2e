'use client'

import type { ReactNode } from 'react'
import type { ButtonVariant } from '@/app/ui/primitives/button'
import { Field } from '@/app/ui/primitives/field'
import { TextArea } from '@/app/ui/primitives/text-area'
import { ActionForm, type FormAction } from './action-form'

interface ReasonFormProps {
  action: FormAction
  /** Tells the reason's field from those of other forms on the page. */
  scope?: string
  hidden: Readonly<Record<string, string>>
  label?: string
  hint?: string
  isOptional?: boolean
  submit: ReactNode
  pendingLabel: string
  variant?: ButtonVariant
}

/** A decision and its written reason. */
export function ReasonForm({ label = 'Reason', hint, isOptional, ...form }: ReasonFormProps) {
  return (
    <ActionForm {...form}>
      {({ valueOf, errorOf, placeOf }) => (
        <Field
          name={placeOf('reason')}
          label={label}
          hint={hint}
          error={errorOf('reason')}
          isOptional={isOptional}
        >
          {(wiring) => (
            <TextArea {...wiring} name="reason" rows={3} maxLength={1000} defaultValue={valueOf('reason')} />
          )}
        </Field>
      )}
    </ActionForm>
  )
}
