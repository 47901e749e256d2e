'use client'

import { Select } from '@/app/ui/primitives/select'
import { TextInput } from '@/app/ui/primitives/text-input'
import { committeeRoles } from '@/lib/domain/committee-roles'
import { ActionForm } from '../../forms/action-form'
import { appointAction } from './actions'
import { FormField } from '../../forms/form-field'

export function AppointForm({ studyId }: { studyId: string }) {
  return (
    <div className="border bg-sheet p-4" data-screen-only>
      <h3 className="mb-3 font-semibold">Appoint a member</h3>
      <ActionForm
        scope="appoint"
        action={appointAction}
        hidden={{ studyId }}
        submit="Appoint"
        pendingLabel="Appointing…"
      >
        {(answer) => (
          <div className="grid gap-4 sm:grid-cols-3">
            <FormField answer={answer} name="name" label="Name">
              {(wiring) => <TextInput {...wiring} autoComplete="off" defaultValue={answer.valueOf('name')} />}
            </FormField>
            <FormField answer={answer} name="address" label="Mail address">
              {(wiring) => (
                <TextInput
                  {...wiring}
                  type="email"
                  autoComplete="off"
                  defaultValue={answer.valueOf('address')}
                />
              )}
            </FormField>
            <FormField answer={answer} name="role" label="Role">
              {(wiring) => (
                <Select
                  {...wiring}
                  placeholder="Choose"
                  defaultValue={answer.valueOf('role')}
                  options={committeeRoles}
                />
              )}
            </FormField>
          </div>
        )}
      </ActionForm>
    </div>
  )
}
