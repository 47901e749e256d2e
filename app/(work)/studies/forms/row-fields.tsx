'use client'

import { useState, type ReactNode } from 'react'
import { Button } from '@/app/ui/primitives/button'
import { Fieldset } from '@/app/ui/primitives/fieldset'
import { fieldId } from '@/app/ui/primitives/field-id'
import type { FormAnswer } from './action-form'

interface RowFieldsProps {
  name: string
  legend: string
  hint: string
  /** What one row is called: "material". */
  of: string
  answer: FormAnswer
  /** Fields of a row that are typed, by which it is told whether a row is empty. */
  typedKeys: readonly string[]
  begun: readonly Readonly<Record<string, string>>[]
  most: number
  /** Empty rows offered to whoever has no scripts. */
  spare?: number
  row: (prefix: string, begun: Readonly<Record<string, string>>, label: string) => ReactNode
}

/** Rows of one kind in a form. Rows left empty are no rows; closed up, their numbers agree with the answer's. */
export function RowFields({
  name,
  legend,
  hint,
  of,
  answer,
  typedKeys,
  begun,
  most,
  spare = 2,
  row,
}: RowFieldsProps) {
  const typed = typedRows({ name, answer, typedKeys }) ?? begun
  const [count, setCount] = useState(Math.min(most, typed.length + spare))

  function addRow() {
    setCount(count + 1)
    // The new row's first field is where the hand goes next.
    requestAnimationFrame(() =>
      document.getElementById(fieldId(`${name}.${count}.${typedKeys[0] ?? ''}`))?.focus(),
    )
  }

  return (
    <Fieldset name={name} legend={legend} hint={hint} error={answer.errorOf(name)}>
      <ol className="flex flex-col gap-3">
        {Array.from({ length: count }, (_, index) => (
          <li key={index} className="border-t pt-3 first:border-t-0 first:pt-0">
            {row(`${name}.${index}`, typed[index] ?? {}, `${of} ${index + 1}`)}
          </li>
        ))}
      </ol>
      {count < most && (
        <p className="hidden [@media(scripting:enabled)]:block">
          <Button onClick={addRow}>Add another {of}</Button>
        </p>
      )}
    </Fieldset>
  )
}

function typedRows({ name, answer, typedKeys }: Pick<RowFieldsProps, 'name' | 'answer' | 'typedKeys'>) {
  const rows = new Map<number, Record<string, string>>()
  for (const field of Object.keys(answer.state.values)) {
    const [, number, key] = new RegExp(`^${name}\\.(\\d+)\\.(\\w+)$`).exec(field) ?? []
    if (number === undefined || key === undefined) continue
    rows.set(Number(number), { ...rows.get(Number(number)), [key]: answer.valueOf(field) })
  }
  if (rows.size === 0) return undefined
  return [...rows]
    .sort(([a], [b]) => a - b)
    .map(([, row]) => row)
    .filter((row) => typedKeys.some((key) => row[key]?.trim()))
}
