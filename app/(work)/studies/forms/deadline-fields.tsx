'use client'

import { Choice } from '@/app/ui/primitives/choice'
import { fieldId } from '@/app/ui/primitives/field-id'
import { Fieldset } from '@/app/ui/primitives/fieldset'
import { TextInput } from '@/app/ui/primitives/text-input'
import type { ZoneGroup } from '@/lib/domain/list-zones'
import type { FormAnswer } from './action-form'
import { ZoneSelect } from './zone-select'
import { FormField } from './form-field'

interface DeadlineFieldsProps {
  answer: FormAnswer
  /** Without zones the deadline is meant in the study's own. */
  zones?: readonly ZoneGroup[]
  begun?: { localTime: string; zone: string }
  hint?: string
}

/** A day and a time as meant in a zone. An hour that occurs twice there is asked back, never guessed. */
export function DeadlineFields({ answer, zones, begun, hint }: DeadlineFieldsProps) {
  const choice = answer.valueOf('choice')
  const choiceError = answer.errorOf('choice')
  return (
    <div className="flex flex-col gap-4">
      <div className="grid items-end gap-4 sm:grid-cols-2">
        <FormField answer={answer} name="localTime" label="Day and time" hint={hint}>
          {(wiring) => (
            <TextInput
              {...wiring}
              type="datetime-local"
              defaultValue={answer.valueOf('localTime', begun?.localTime)}
            />
          )}
        </FormField>
        {zones && (
          <FormField
            answer={answer}
            name="zone"
            label="In the time of"
            hint="Each laboratory is shown the same moment in its own time."
          >
            {(wiring) => (
              <ZoneSelect wiring={wiring} zones={zones} defaultValue={answer.valueOf('zone', begun?.zone)} />
            )}
          </FormField>
        )}
      </div>
      {(choiceError || choice) && (
        <Fieldset
          name={answer.placeOf('choice')}
          legend="Which of the two"
          hint="Clocks go back that night, so this time occurs twice."
          error={choiceError}
        >
          {choices.map(({ value, label }) => (
            <Choice
              key={value}
              kind="radio"
              id={`${fieldId(answer.placeOf('choice'))}-${value}`}
              name="choice"
              value={value}
              label={label}
              defaultChecked={choice === value}
            />
          ))}
        </Fieldset>
      )}
    </div>
  )
}

const choices = [
  { value: 'earlier', label: 'The first, before clocks go back' },
  { value: 'later', label: 'The second, after clocks went back' },
]
