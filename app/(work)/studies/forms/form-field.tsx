'use client'

import type { ReactNode } from 'react'
import { Field, type FieldWiring } from '@/app/ui/primitives/field'
import type { FormAnswer } from './action-form'

interface FormFieldProps {
  answer: FormAnswer
  name: string
  label: ReactNode
  hint?: ReactNode
  isOptional?: boolean
  children: (wiring: FieldWiring) => ReactNode
}

/** A field of one form among several of the page: sent under its plain name, found under the form's own. */
export function FormField({ answer, name, children, ...rest }: FormFieldProps) {
  return (
    <Field {...rest} name={answer.placeOf(name)} error={answer.errorOf(name)}>
      {(wiring) => children({ ...wiring, name })}
    </Field>
  )
}
