'use client'

import { useState, type FormEvent } from 'react'
import { Fieldset } from '@/app/ui/primitives/fieldset'
import { RadioGroup } from '@/app/ui/primitives/radio-group'
import { TextArea } from '@/app/ui/primitives/text-area'
import { TextInput } from '@/app/ui/primitives/text-input'
import { countTypedPlaces, describeTypedPlaces } from '@/lib/domain/count-typed-places'
import type { ZoneGroup } from '@/lib/domain/list-zones'
import type { BegunPlan } from '@/lib/domain/begin-plan'
import { ActionForm, type FormAction, type FormAnswer } from './action-form'
import { DeadlineFields } from './deadline-fields'
import { LayoutRows } from './layout-rows'
import { FormField } from './form-field'

interface PlanFormProps {
  action: FormAction
  hidden: Readonly<Record<string, string>>
  begun: BegunPlan
  zones: readonly ZoneGroup[]
  submit: string
}

/** Everything a coordinator settles before laboratories are asked. */
export function PlanForm({ action, hidden, begun, zones, submit }: PlanFormProps) {
  return (
    <ActionForm action={action} hidden={hidden} submit={submit} pendingLabel="Saving…">
      {(answer) => <PlanFields answer={answer} begun={begun} zones={zones} />}
    </ActionForm>
  )
}

function PlanFields({
  answer,
  begun,
  zones,
}: { answer: FormAnswer } & Pick<PlanFormProps, 'begun' | 'zones'>) {
  const [sentence, setSentence] = useState(() =>
    describeTypedPlaces(countTypedPlaces(begunTexts(answer, begun))),
  )

  function recount({ currentTarget }: FormEvent<HTMLElement>) {
    const form = currentTarget.closest('form')
    if (form) setSentence(describeTypedPlaces(countTypedPlaces(textsOf(new FormData(form)))))
  }

  return (
    <div onInput={recount} className="flex flex-col gap-8">
      <Identity answer={answer} begun={begun} />
      <LayoutRows answer={answer} begun={begun} />
      <p aria-live="polite" className="border-l-[3px] border-indigo bg-indigo-wash px-4 py-2">
        {sentence}
      </p>
      <RadioGroup
        name="limitFactor"
        legend="Factor of the limits"
        hint="The repeatability and reproducibility limits are this factor times their standard deviations."
        options={[
          { value: '2.8', label: '2.8, as methods usually state it' },
          { value: '2.77', label: '1.96·√2, unrounded' },
        ]}
        defaultValue={answer.valueOf('limitFactor', begun.limitFactor)}
      />
      <Fieldset name="deadline" legend="Deadline for returns">
        <DeadlineFields answer={answer} zones={zones} begun={begun} />
      </Fieldset>
    </div>
  )
}

function Identity({ answer, begun }: { answer: FormAnswer; begun: BegunPlan }) {
  return (
    <div className="flex flex-col gap-4">
      <FormField
        answer={answer}
        name="shortName"
        label="Short name"
        hint="Begins the subject of every mail and stands in every file's name, such as HC-27."
      >
        {(wiring) => (
          <TextInput
            {...wiring}
            defaultValue={answer.valueOf('shortName', begun.shortName)}
            className="sm:max-w-60"
          />
        )}
      </FormField>
      <FormField answer={answer} name="title" label="Title">
        {(wiring) => <TextInput {...wiring} defaultValue={answer.valueOf('title', begun.title)} />}
      </FormField>
      <FormField answer={answer} name="method" label="Test method" hint="Its number and what it determines.">
        {(wiring) => <TextInput {...wiring} defaultValue={answer.valueOf('method', begun.method)} />}
      </FormField>
      <FormField
        answer={answer}
        name="purpose"
        label="Purpose"
        hint="Laboratories read it in their invitation."
        isOptional
      >
        {(wiring) => (
          <TextArea {...wiring} rows={3} defaultValue={answer.valueOf('purpose', begun.purpose)} />
        )}
      </FormField>
    </div>
  )
}

/** The rows as the form begins with them, which after an answer are those that were typed. */
function begunTexts({ state }: FormAnswer, begun: BegunPlan): Map<string, string> {
  const typed = Object.entries(state.values).filter(
    (entry): entry is [string, string] => typeof entry[1] === 'string',
  )
  if (typed.length > 0) return new Map(typed)
  const lists = (['measurands', 'materials', 'levels'] as const).flatMap((list) =>
    begun[list].flatMap((row, index) =>
      Object.entries(row).map(([key, text]) => [`${list}.${index}.${key}`, text] as const),
    ),
  )
  return new Map(lists)
}

function textsOf(form: FormData): Map<string, string> {
  return new Map([...form].filter((entry): entry is [string, string] => typeof entry[1] === 'string'))
}
