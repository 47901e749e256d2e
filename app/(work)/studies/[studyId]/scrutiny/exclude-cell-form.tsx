'use client'

import { Field } from '@/app/ui/primitives/field'
import { Select } from '@/app/ui/primitives/select'
import { TextArea } from '@/app/ui/primitives/text-area'
import { ActionForm } from '../../forms/action-form'
import { excludeCellAction } from './actions'

interface ExcludeCellFormProps {
  studyId: string
  measurandId: string
  codes: readonly string[]
  materials: readonly { materialId: string; name: string }[]
}

/** Which cell, and why. */
export function ExcludeCellForm({ studyId, measurandId, codes, materials }: ExcludeCellFormProps) {
  return (
    <ActionForm
      action={excludeCellAction}
      hidden={{ studyId, measurandId }}
      submit="Set the cell aside"
      pendingLabel="Recording…"
    >
      {({ valueOf, errorOf }) => (
        <>
          <Field name="code" label="Laboratory" error={errorOf('code')}>
            {(wiring) => (
              <Select
                {...wiring}
                defaultValue={valueOf('code')}
                placeholder="Choose"
                options={codes.map((code) => ({ value: code, label: code }))}
              />
            )}
          </Field>
          <Field name="materialId" label="Material" error={errorOf('materialId')}>
            {(wiring) => (
              <Select
                {...wiring}
                defaultValue={valueOf('materialId')}
                placeholder="Choose"
                options={materials.map(({ materialId, name }) => ({ value: materialId, label: name }))}
              />
            )}
          </Field>
          <Field
            name="reason"
            label="Reason"
            hint="What was found out, in a sentence. Write of laboratories by code: the committee and the published page show it."
            error={errorOf('reason')}
          >
            {(wiring) => <TextArea {...wiring} rows={3} maxLength={1000} defaultValue={valueOf('reason')} />}
          </Field>
        </>
      )}
    </ActionForm>
  )
}
