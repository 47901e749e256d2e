'use client'

import { TextArea } from '@/app/ui/primitives/text-area'
import type { ZoneGroup } from '@/lib/domain/list-zones'
import { ActionForm, type FormAction } from './action-form'
import { DeadlineFields } from './deadline-fields'
import { FormField } from './form-field'

interface DeadlineFormProps {
  scope?: string
  action: FormAction
  hidden: Readonly<Record<string, string>>
  zones?: readonly ZoneGroup[]
  begun?: { localTime: string; zone: string }
  /** Asks why, with this label, where the decision is recorded with its reason. */
  reasonLabel?: string
  hint?: string
  submit: string
  pendingLabel: string
}

/** A form that sets a moment, for all laboratories or for one. */
export function DeadlineForm({
  scope,
  action,
  hidden,
  zones,
  begun,
  reasonLabel,
  hint,
  submit,
  pendingLabel,
}: DeadlineFormProps) {
  return (
    <ActionForm scope={scope} action={action} hidden={hidden} submit={submit} pendingLabel={pendingLabel}>
      {(answer) => (
        <>
          <DeadlineFields answer={answer} zones={zones} begun={begun} hint={hint} />
          {reasonLabel && (
            <FormField answer={answer} name="reason" label={reasonLabel} hint="It stands in the audit trail.">
              {(wiring) => <TextArea {...wiring} rows={2} defaultValue={answer.valueOf('reason')} />}
            </FormField>
          )}
        </>
      )}
    </ActionForm>
  )
}
