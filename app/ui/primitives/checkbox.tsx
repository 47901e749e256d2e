import type { ComponentProps, ReactNode } from 'react'
import { Choice } from './choice'
import { FieldError } from './field'
import { fieldId } from './field-id'

type CheckboxProps = Omit<ComponentProps<'input'>, 'type' | 'name'> & {
  name: string
  label: ReactNode
  hint?: ReactNode
  error?: string
}

/** A single box. Several of one name need an `id` each. */
export function Checkbox({ name, label, hint, error, id = fieldId(name), ...rest }: CheckboxProps) {
  const choice = (
    <Choice
      {...rest}
      kind="checkbox"
      id={id}
      name={name}
      label={label}
      hint={hint}
      aria-invalid={error ? true : undefined}
      aria-describedby={error ? `${id}-error` : undefined}
    />
  )
  if (!error) return choice
  return (
    <div className="border-l-[3px] border-madder pl-3">
      <FieldError id={`${id}-error`}>{error}</FieldError>
      {choice}
    </div>
  )
}
