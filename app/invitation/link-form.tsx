import { useMemo } from 'react'
import { ErrorSummary } from '@/app/ui/primitives/error-summary'
import { Field } from '@/app/ui/primitives/field'
import { SubmitButton } from '@/app/ui/primitives/submit-button'
import { TextInput } from '@/app/ui/primitives/text-input'

/** For a browser without scripts, and for a link that the mail program cut. */
export function LinkForm({ action, error }: { action: (form: FormData) => void; error: string | undefined }) {
  const errors = useMemo(() => (error ? [{ field: 'link', message: error }] : []), [error])
  return (
    <form action={action} className="flex flex-col items-start gap-4">
      <ErrorSummary errors={errors} />
      <div className="w-full">
        <Field
          name="link"
          label="Link from the mail"
          hint="Paste the whole link here. Only so does it reach us where scripts are switched off."
          error={error}
        >
          {(wiring) => (
            <TextInput {...wiring} isFigure autoComplete="off" spellCheck={false} maxLength={1000} />
          )}
        </Field>
      </div>
      <input type="hidden" name="step" value="read" />
      <SubmitButton pendingLabel="Reading…">Read the invitation</SubmitButton>
    </form>
  )
}
