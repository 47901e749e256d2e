import type { ReactNode } from 'react'
import { fieldId } from './field-id'

/** What a control must carry to belong to its field; spread it on the control. */
export interface FieldWiring {
  id: string
  name: string
  required?: boolean
  'aria-describedby'?: string
  'aria-invalid'?: true
}

interface FieldProps {
  name: string
  label: ReactNode
  hint?: ReactNode
  error?: string
  /** Fields are required unless said otherwise; the word stands in the label, not an asterisk. */
  isOptional?: boolean
  /** For a label that the eye gets from elsewhere, such as a table's header. */
  isLabelHidden?: boolean
  children: (wiring: FieldWiring) => ReactNode
}

/** A label, a hint, an error and the control they belong to: all the ids are tied here and nowhere else. */
export function Field({
  name,
  label,
  hint,
  error,
  isOptional = false,
  isLabelHidden = false,
  children,
}: FieldProps) {
  const id = fieldId(name)
  const described = [hint ? `${id}-hint` : '', error ? `${id}-error` : ''].filter(Boolean).join(' ')

  return (
    <div className={error ? 'border-l-[3px] border-madder pl-3' : undefined}>
      <label htmlFor={id} className={isLabelHidden ? 'sr-only' : 'mb-1 block font-semibold'}>
        {label}
        {isOptional && <span className="font-normal text-ink-soft"> (optional)</span>}
      </label>
      {hint && <FieldHint id={`${id}-hint`}>{hint}</FieldHint>}
      {error && <FieldError id={`${id}-error`}>{error}</FieldError>}
      {children({
        id,
        name,
        ...(isOptional ? {} : { required: true }),
        ...(described ? { 'aria-describedby': described } : {}),
        ...(error ? { 'aria-invalid': true as const } : {}),
      })}
    </div>
  )
}

export function FieldHint({ id, children }: { id: string; children: ReactNode }) {
  return (
    <p id={id} className="mb-1.5 max-w-text text-small text-ink-soft">
      {children}
    </p>
  )
}

export function FieldError({ id, children }: { id: string; children: ReactNode }) {
  return (
    <p id={id} className="mb-1.5 flex max-w-text items-start gap-1.5 text-small font-semibold text-madder">
      <svg width="13" height="13" viewBox="0 0 13 13" aria-hidden="true" className="mt-[0.2em] shrink-0">
        <path d="M6.5 0.8L12.2 6.5L6.5 12.2L0.8 6.5Z" fill="currentColor" />
      </svg>
      <span>{children}</span>
    </p>
  )
}
