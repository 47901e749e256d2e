'use client'

import { useActionState, useMemo } from 'react'
import { ButtonLink } from '@/app/ui/primitives/button'
import { ErrorSummary } from '@/app/ui/primitives/error-summary'
import { Field } from '@/app/ui/primitives/field'
import { SubmitButton } from '@/app/ui/primitives/submit-button'
import { TextArea } from '@/app/ui/primitives/text-area'
import { paths } from '@/lib/web/paths'
import type { FormState } from '@/lib/web/form-state'

interface ConfirmReturnProps {
  studyId: string
  submissionKey: string
  /** What this page shows, so that nothing else can be returned from it. */
  checked: string
  remark: string
  missing: number
  canReturn: boolean
  action: (previous: FormState, form: FormData) => Promise<FormState>
}

const untouched: FormState = { errors: {}, values: {} }

/** The last step: a remark, and the button that returns. */
export function ConfirmReturn({ studyId, submissionKey, checked, remark, missing, canReturn, action }: ConfirmReturnProps) {
  const [state, formAction] = useActionState(action, untouched)
  const errors = useMemo(() => listErrors(state), [state])
  const typed = state.values.remark
  return (
    <form action={formAction} className="flex flex-col gap-5">
      <ErrorSummary errors={errors} />
      <input type="hidden" name="studyId" value={studyId} />
      <input type="hidden" name="submissionKey" value={submissionKey} />
      <input type="hidden" name="checked" value={checked} />
      <Field
        name="remark"
        label="Remark"
        hint={missing > 0 ? 'Say in a sentence why results are missing. Name no laboratory and no person.' : 'For the coordinator. Name no laboratory and no person.'}
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
        <ButtonLink href={paths.resultSheet(studyId)}>Back to the sheet</ButtonLink>
      </div>
    </form>
  )
}

function listErrors({ errors, message }: FormState): { field?: string; message: string }[] {
  const fields = Object.entries(errors).flatMap(([field, messages]) => messages.map((each) => ({ field, message: each })))
  return [...(message ? [{ message }] : []), ...fields]
}
