'use client'

import type { ReactNode } from 'react'
import type { ButtonVariant } from '@/app/ui/primitives/button'
import { Field } from '@/app/ui/primitives/field'
import { TextArea } from '@/app/ui/primitives/text-area'
import { ActionForm, type FormAction } from './action-form'

interface ReasonFormProps {
  action: FormAction
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
      {({ valueOf, errorOf }) => (
        <Field name="reason" label={label} hint={hint} error={errorOf('reason')} isOptional={isOptional}>
          {(wiring) => <TextArea {...wiring} rows={3} maxLength={1000} defaultValue={valueOf('reason')} />}
        </Field>
      )}
    </ActionForm>
  )
}
