'use client'

import { TextArea } from '@/app/ui/primitives/text-area'
import { ActionForm } from '../../forms/action-form'
import { FormField } from '../../forms/form-field'
import { closeStudyAction } from './actions'

export function CloseForm({ studyId, isEarly }: { studyId: string; isEarly: boolean }) {
  return (
    <ActionForm
      scope="close"
      action={closeStudyAction}
      hidden={{ studyId }}
      submit="Close for returns"
      pendingLabel="Closing…"
      variant="destructive"
    >
      {(answer) => (
        <FormField
          answer={answer}
          name="reason"
          label="Reason"
          hint="It stands in the audit trail."
          isOptional={!isEarly}
        >
          {(wiring) => <TextArea {...wiring} rows={2} defaultValue={answer.valueOf('reason')} />}
        </FormField>
      )}
    </ActionForm>
  )
}
