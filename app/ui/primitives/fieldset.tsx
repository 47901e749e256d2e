import type { ReactNode } from 'react'
import { FieldError, FieldHint } from './field'
import { fieldId } from './field-id'

interface FieldsetProps {
  name: string
  legend: ReactNode
  hint?: ReactNode
  error?: string
  children: ReactNode
}

/** Controls that answer one question together. An error summary's link for `name` lands on the group. */
export function Fieldset({ name, legend, hint, error, children }: FieldsetProps) {
  const id = fieldId(name)
  const described = [hint ? `${id}-hint` : '', error ? `${id}-error` : ''].filter(Boolean).join(' ')
  return (
    <fieldset
      id={id}
      tabIndex={-1}
      aria-describedby={described || undefined}
      className={error ? 'border-l-[3px] border-madder pl-3' : undefined}
    >
      <legend className="mb-1 font-semibold">{legend}</legend>
      {hint && <FieldHint id={`${id}-hint`}>{hint}</FieldHint>}
      {error && <FieldError id={`${id}-error`}>{error}</FieldError>}
      <div className="flex flex-col gap-2">{children}</div>
    </fieldset>
  )
}
