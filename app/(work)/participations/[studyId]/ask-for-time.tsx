'use client'

import { useActionState, useMemo } from 'react'
import { ErrorSummary } from '@/app/ui/primitives/error-summary'
import { Field } from '@/app/ui/primitives/field'
import { Notice } from '@/app/ui/primitives/notice'
import { SubmitButton } from '@/app/ui/primitives/submit-button'
import { TextArea } from '@/app/ui/primitives/text-area'
import type { FormState } from '@/lib/web/form-state'

interface AskForTimeProps {
  studyId: string
  isLate: boolean
  action: (previous: FormState, form: FormData) => Promise<FormState>
}

const untouched: FormState = { errors: {}, values: {} }

/** A message to the coordinator; only the coordinator can move the date. */
export function AskForTime({ studyId, isLate, action }: AskForTimeProps) {
  const [state, formAction] = useActionState(action, untouched)
  const errors = useMemo(
    () => [
      ...(state.message ? [{ message: state.message }] : []),
      ...Object.entries(state.errors).flatMap(([field, messages]) =>
        messages.map((message) => ({ field, message })),
      ),
    ],
    [state],
  )
  if (state.ok) return <Notice tone="done" title={state.ok} isLive />
  const typed = state.values.message
  return (
    <form action={formAction} className="flex max-w-text flex-col items-start gap-3">
      <ErrorSummary errors={errors} />
      <input type="hidden" name="studyId" value={studyId} />
      <div className="w-full">
        <Field
          name="message"
          label="Ask the coordinator for more time"
          hint={
            isLate
              ? 'Say how much time you need, and why. Until it is granted, nothing can be returned.'
              : 'If the date cannot be kept, say so early: how much time you need, and why.'
          }
          error={state.errors.message?.join(' ')}
        >
          {(wiring) => (
            <TextArea
              {...wiring}
              defaultValue={typeof typed === 'string' ? typed : ''}
              rows={3}
              maxLength={1000}
            />
          )}
        </Field>
      </div>
      <SubmitButton variant={isLate ? 'primary' : 'plain'} pendingLabel="Sending…">
        Send to the coordinator
      </SubmitButton>
    </form>
  )
}
