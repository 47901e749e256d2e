'use client'

import { useActionState, useMemo } from 'react'
import { ButtonLink } from '@/app/ui/primitives/button'
import { ErrorSummary } from '@/app/ui/primitives/error-summary'
import { Field } from '@/app/ui/primitives/field'
import { SubmitButton } from '@/app/ui/primitives/submit-button'
import { TextArea } from '@/app/ui/primitives/text-area'
import type { FormState } from '@/lib/web/form-state'

interface ConfirmReturnProps {
  /** What is returned, as the page shows it: sent along unseen, so that nothing else can be returned from it. */
  fields: Readonly<Record<string, string>>
  remark: string
  missing: number
  canReturn: boolean
  back: { href: string; words: string }
  action: (previous: FormState, form: FormData) => Promise<FormState>
}

const untouched: FormState = { errors: {}, values: {} }

/** The last step: a remark, and the button that returns. */
export function ConfirmReturn({ fields, remark, missing, canReturn, back, action }: ConfirmReturnProps) {
  const [state, formAction] = useActionState(action, untouched)
  const errors = useMemo(() => listErrors(state), [state])
  const typed = state.values.remark
  return (
    <form action={formAction} className="flex flex-col gap-5">
      <ErrorSummary errors={errors} />
      {Object.entries(fields).map(([name, value]) => (
        <input key={name} type="hidden" name={name} value={value} />
      ))}
      <Field
        name="remark"
        label="Remark"
        hint={
          missing > 0
            ? 'Say in a sentence why results are missing. Name no laboratory and no person.'
            : 'For the coordinator. Name no laboratory and no person.'
        }
        error={state.errors.remark?.join(' ')}
        isOptional={missing === 0}
      >
        {(wiring) => (
          <TextArea
            {...wiring}
            defaultValue={typeof typed === 'string' ? typed : remark}
            rows={3}
            maxLength={2000}
            className="max-w-text"
          />
        )}
      </Field>
      <div className="flex flex-wrap gap-2.5">
        {canReturn && <SubmitButton pendingLabel="Returning…">Return these results</SubmitButton>}
        <ButtonLink href={back.href}>{back.words}</ButtonLink>
      </div>
    </form>
  )
}

function listErrors({ errors, message }: FormState): { field?: string; message: string }[] {
  const fields = Object.entries(errors).flatMap(([field, messages]) =>
    messages.map((each) => ({ field, message: each })),
  )
  return [...(message ? [{ message }] : []), ...fields]
}
