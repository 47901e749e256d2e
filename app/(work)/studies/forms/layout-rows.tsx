'use client'

import type { ReactNode } from 'react'
import { Field } from '@/app/ui/primitives/field'
import { Select } from '@/app/ui/primitives/select'
import { TextInput } from '@/app/ui/primitives/text-input'
import type { BegunPlan } from '@/lib/domain/begin-plan'
import type { FormAnswer } from './action-form'
import { RowFields } from './row-fields'

/** What is measured, on what, and how often: the three lists that make up what a laboratory is asked. */
export function LayoutRows({ answer, begun }: { answer: FormAnswer; begun: BegunPlan }) {
  const cell = (prefix: string, key: string, label: { word: string; of: string }, begunText = '') => ({
    name: `${prefix}.${key}`,
    label: <RowLabel {...label} />,
    error: answer.errorOf(`${prefix}.${key}`),
    defaultValue: begunText,
  })

  return (
    <>
      <RowFields
        name="measurands"
        legend="Measurands"
        hint="What is measured, in which unit, and to how many decimals it is reported. A measurand with a true zero can also be described by relative figures."
        of="measurand"
        answer={answer}
        typedKeys={['name', 'unit', 'decimals']}
        begun={begun.measurands}
        most={10}
        spare={1}
        row={(prefix, row, of) => (
          <div className="grid grid-cols-2 gap-3 max-sm:[&>*:first-child]:col-span-2 sm:grid-cols-[minmax(0,2fr)_minmax(0,1fr)_6rem_8.5rem]">
            <TextCell {...cell(prefix, 'name', { word: 'Name', of }, row.name)} />
            <TextCell {...cell(prefix, 'unit', { word: 'Unit', of }, row.unit)} />
            <TextCell
              {...cell(prefix, 'decimals', { word: 'Decimals', of }, row.decimals)}
              isFigure
              inputMode="numeric"
            />
            <Field name={`${prefix}.hasTrueZero`} label={<RowLabel word="True zero" of={of} />}>
              {({ required: _, ...wiring }) => (
                <Select
                  {...wiring}
                  defaultValue={row.hasTrueZero ?? 'true'}
                  options={[
                    { value: 'true', label: 'Yes' },
                    { value: 'false', label: 'No' },
                  ]}
                />
              )}
            </Field>
          </div>
        )}
      />
      <RowFields
        name="materials"
        legend="Materials"
        hint="Each is one even lot, divided into identical specimens."
        of="material"
        answer={answer}
        typedKeys={['name', 'description']}
        begun={begun.materials}
        most={50}
        row={(prefix, row, of) => (
          <div className="grid gap-3 sm:grid-cols-[minmax(0,1fr)_minmax(0,2fr)]">
            <TextCell {...cell(prefix, 'name', { word: 'Name', of }, row.name)} />
            <TextCell
              {...cell(prefix, 'description', { word: 'Description', of }, row.description)}
              isOptional
            />
          </div>
        )}
      />
      <RowFields
        name="levels"
        legend="Levels within a laboratory"
        hint="From the outer to the inner, such as day, then replicate. The innermost is the single result; the laboratory itself is always the outermost and is not named here."
        of="level"
        answer={answer}
        typedKeys={['name', 'count']}
        begun={begun.levels}
        most={4}
        spare={1}
        row={(prefix, row, of) => (
          <div className="grid gap-3 sm:grid-cols-[minmax(0,2fr)_8rem]">
            <TextCell {...cell(prefix, 'name', { word: 'Name', of }, row.name)} />
            <TextCell
              {...cell(prefix, 'count', { word: 'How many', of }, row.count)}
              isFigure
              inputMode="numeric"
            />
          </div>
        )}
      />
    </>
  )
}

interface TextCellProps {
  name: string
  label: ReactNode
  error: string | undefined
  defaultValue: string
  isOptional?: boolean
  isFigure?: boolean
  inputMode?: 'numeric'
}

function TextCell({ name, label, error, isOptional, isFigure, ...input }: TextCellProps) {
  return (
    <Field name={name} label={label} error={error} isOptional={isOptional}>
      {/* A spare row may stay empty, so no single box of it is required. */}
      {({ required: _, ...wiring }) => <TextInput {...wiring} isFigure={isFigure} {...input} />}
    </Field>
  )
}

/** The eye sees the row; whoever hears the label is told it. */
function RowLabel({ word, of }: { word: string; of: string }) {
  return (
    <>
      {word}
      <span className="sr-only"> of {of}</span>
    </>
  )
}
