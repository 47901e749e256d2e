'use client'

import { useActionState, useMemo } from 'react'
import { ErrorSummary } from '@/app/ui/primitives/error-summary'
import { Field } from '@/app/ui/primitives/field'
import { SubmitButton } from '@/app/ui/primitives/submit-button'
import { TextInput } from '@/app/ui/primitives/text-input'
import { untouchedForm } from '@/lib/web/form-state'
import { listFormErrors } from '@/lib/web/list-form-errors'
import { requestLinkAction } from './actions'

export function AddressForm({ next }: { next: string }) {
  const [state, act] = useActionState(requestLinkAction, untouchedForm)
  const errors = useMemo(() => listFormErrors(state), [state])
  const typed = state.values.address

  return (
    <form action={act} noValidate className="flex max-w-text flex-col items-start gap-5">
      <ErrorSummary errors={errors} />
      <input type="hidden" name="next" value={next} />
      <div className="w-full max-w-96">
        <Field name="address" label="Mail address" error={state.errors.address?.[0]}>
          {(wiring) => (
            <TextInput
              {...wiring}
              type="email"
              autoComplete="email"
              spellCheck={false}
              defaultValue={typeof typed === 'string' ? typed : ''}
            />
          )}
        </Field>
      </div>
      <SubmitButton pendingLabel="Sending…">Send me a link</SubmitButton>
    </form>
  )
}
