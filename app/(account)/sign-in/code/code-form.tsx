import { Button } from '@/app/ui/primitives/button'
import { ErrorSummary } from '@/app/ui/primitives/error-summary'
import { Field } from '@/app/ui/primitives/field'
import { TextInput } from '@/app/ui/primitives/text-input'

const problems: Record<string, { field: 'address' | 'code'; message: string }> = {
  'bad-code': {
    field: 'code',
    message:
      'This code does not fit, or no longer serves. A code lasts 10 minutes and five tries; the link in the same mail may still work.',
  },
  'bad-address': { field: 'address', message: 'Give one mail address, such as name@laboratory.example.' },
}

/** Posts to a handler rather than an action, so that it is one and the same with and without scripts. */
export function CodeForm({ address, problem }: { address: string; problem: string | null }) {
  const fault = problem && Object.hasOwn(problems, problem) ? problems[problem] : undefined
  const errorOf = (field: string) => (fault?.field === field ? { error: fault.message } : {})

  return (
    <form method="post" action="/api/sign-in" className="flex max-w-text flex-col items-start gap-5">
      <ErrorSummary errors={fault ? [fault] : []} />
      <div className="w-full max-w-96">
        <Field name="address" label="Mail address" {...errorOf('address')}>
          {(wiring) => (
            <TextInput
              {...wiring}
              type="email"
              autoComplete="email"
              spellCheck={false}
              defaultValue={address}
            />
          )}
        </Field>
      </div>
      <Field
        name="code"
        label="Code from the mail"
        hint="Eight digits; a space between them does no harm."
        {...errorOf('code')}
      >
        {(wiring) => (
          <TextInput
            {...wiring}
            isFigure
            inputMode="numeric"
            autoComplete="one-time-code"
            maxLength={20}
            className="w-44"
          />
        )}
      </Field>
      <Button type="submit" variant="primary">
        Sign in
      </Button>
    </form>
  )
}
