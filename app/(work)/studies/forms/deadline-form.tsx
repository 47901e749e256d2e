'use client'

import { Field } from '@/app/ui/primitives/field'
import { TextArea } from '@/app/ui/primitives/text-area'
import type { ZoneGroup } from '@/lib/domain/list-zones'
import { ActionForm, type FormAction } from './action-form'
import { DeadlineFields } from './deadline-fields'

interface DeadlineFormProps {
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
    <ActionForm action={action} hidden={hidden} submit={submit} pendingLabel={pendingLabel}>
      {(answer) => (
        <>
          <DeadlineFields answer={answer} zones={zones} begun={begun} hint={hint} />
          {reasonLabel && (
            <Field
              name="reason"
              label={reasonLabel}
              hint="It stands in the audit trail."
              error={answer.errorOf('reason')}
            >
              {(wiring) => <TextArea {...wiring} rows={2} defaultValue={answer.valueOf('reason')} />}
            </Field>
          )}
        </>
      )}
    </ActionForm>
  )
}
