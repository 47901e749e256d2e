'use client'

import { Fragment, useActionState, useEffect, useMemo, useState, type ReactNode } from 'react'
import type { ButtonVariant } from '@/app/ui/primitives/button'
import { ErrorSummary } from '@/app/ui/primitives/error-summary'
import { Notice } from '@/app/ui/primitives/notice'
import { SubmitButton } from '@/app/ui/primitives/submit-button'
import { untouchedForm, type FormState } from '@/lib/web/form-state'

export type FormAction = (previous: FormState, form: FormData) => Promise<FormState>

/** What a form's last answer says of one field. */
export interface FormAnswer {
  readonly state: FormState
  /** What was typed, or the text the form began with. */
  valueOf(name: string, begun?: string): string
  errorOf(name: string): string | undefined
  /** The field's name within the page, where several forms have one of the same name. */
  placeOf(name: string): string
}

interface ActionFormProps {
  action: FormAction
  /** Tells the form's fields from those of other forms on the page. */
  scope?: string
  /** Values that go along unseen, such as the id of the study. */
  hidden?: Readonly<Record<string, string>>
  submit: ReactNode
  pendingLabel: string
  variant?: ButtonVariant
  /** Further buttons beside the first. */
  besides?: (answer: FormAnswer) => ReactNode
  children?: (answer: FormAnswer) => ReactNode
}

/** A form that works without scripts, says above itself what to mend, and keeps everything typed. */
export function ActionForm({
  action,
  scope,
  hidden = {},
  submit,
  pendingLabel,
  variant,
  besides,
  children,
}: ActionFormProps) {
  const [state, formAction] = useActionState(action, untouchedForm)
  const attempt = useAttempt(state)
  const errors = useMemo(() => listErrors(state, scope), [state, scope])
  useErrorInTitle(errors.length > 0)
  const answer: FormAnswer = {
    state,
    valueOf: (name, begun = '') => typedText(state, name) ?? begun,
    errorOf: (name) => state.errors[name]?.join(' '),
    placeOf: (name) => placeOf(name, scope),
  }

  return (
    <form action={formAction} noValidate className="flex max-w-full flex-col items-stretch gap-5">
      <ErrorSummary errors={errors} />
      {state.ok && <Notice tone="done" title={state.ok} isLive />}
      {Object.entries(hidden).map(([name, value]) => (
        <input key={name} type="hidden" name={name} value={value} />
      ))}
      {/* A sent form is emptied by the browser; drawn afresh, its fields begin with what was typed. */}
      <Fragment key={attempt}>{children?.(answer)}</Fragment>
      <div className="flex flex-wrap items-center gap-3">
        <SubmitButton variant={variant} pendingLabel={pendingLabel}>
          {submit}
        </SubmitButton>
        {besides?.(answer)}
      </div>
    </form>
  )
}

function typedText({ values }: FormState, name: string): string | undefined {
  if (Object.keys(values).length === 0) return undefined
  const value = values[name]
  return Array.isArray(value) ? (value.at(-1) ?? '') : (value ?? '')
}

function placeOf(name: string, scope: string | undefined): string {
  return scope ? `${scope}-${name}` : name
}

function listErrors(state: FormState, scope: string | undefined): { field?: string; message: string }[] {
  const byField = Object.entries(state.errors).flatMap(([field, messages]) =>
    messages.map((message) => ({ field: placeOf(field, scope), message })),
  )
  return state.message ? [{ message: state.message }, ...byField] : byField
}

/** Counts the answers a form has had. */
function useAttempt(state: FormState): number {
  const [seen, setSeen] = useState({ state, attempt: 0 })
  if (seen.state !== state) setSeen({ state, attempt: seen.attempt + 1 })
  return seen.state === state ? seen.attempt : seen.attempt + 1
}

/** The window's title says so too, for whoever hears it first. */
function useErrorInTitle(hasErrors: boolean) {
  useEffect(() => {
    if (!hasErrors) return
    const title = document.title
    document.title = `Not accepted yet: ${title}`
    return () => {
      document.title = title
    }
  }, [hasErrors])
}
