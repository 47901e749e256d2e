import type { ReactNode } from 'react'
import { Choice } from './choice'
import { fieldId } from './field-id'
import { Fieldset } from './fieldset'

interface RadioGroupProps {
  name: string
  legend: ReactNode
  hint?: ReactNode
  error?: string
  options: readonly { value: string; label: ReactNode; hint?: ReactNode; isDisabled?: boolean }[]
  defaultValue?: string
  isOptional?: boolean
}

export function RadioGroup({
  name,
  legend,
  hint,
  error,
  options,
  defaultValue,
  isOptional = false,
}: RadioGroupProps) {
  return (
    <Fieldset name={name} legend={legend} hint={hint} error={error}>
      {options.map((option) => (
        <Choice
          key={option.value}
          kind="radio"
          id={`${fieldId(name)}-${option.value}`}
          name={name}
          value={option.value}
          label={option.label}
          hint={option.hint}
          disabled={option.isDisabled}
          required={!isOptional}
          defaultChecked={option.value === defaultValue}
        />
      ))}
    </Fieldset>
  )
}
