'use client'

import { TextInput } from '@/app/ui/primitives/text-input'
import type { ZoneGroup } from '@/lib/domain/list-zones'
import { ActionForm, type FormAnswer } from '../../forms/action-form'
import { inviteLaboratoryAction } from './actions'
import { ContactFields } from './contact-fields'
import { FormField } from '../../forms/form-field'

export function InviteForm({
  studyId,
  zones,
  isOpen,
}: {
  studyId: string
  zones: readonly ZoneGroup[]
  isOpen: boolean
}) {
  return (
    <ActionForm
      scope="invite"
      action={inviteLaboratoryAction}
      hidden={{ studyId }}
      submit={isOpen ? 'Invite it now' : 'Put it on the list'}
      pendingLabel="Adding…"
    >
      {(answer) => (
        <div className="flex flex-col gap-4">
          <div className="grid gap-4 sm:grid-cols-3">
            <PlaceField answer={answer} name="laboratory" label="Laboratory" />
            <PlaceField answer={answer} name="city" label="Town" isOptional />
            <PlaceField answer={answer} name="country" label="Country" isOptional />
          </div>
          <ContactFields answer={answer} zones={zones} />
        </div>
      )}
    </ActionForm>
  )
}

function PlaceField({
  answer,
  name,
  label,
  isOptional,
}: {
  answer: FormAnswer
  name: string
  label: string
  isOptional?: boolean
}) {
  return (
    <FormField answer={answer} name={name} label={label} isOptional={isOptional}>
      {(wiring) => <TextInput {...wiring} autoComplete="off" defaultValue={answer.valueOf(name)} />}
    </FormField>
  )
}
