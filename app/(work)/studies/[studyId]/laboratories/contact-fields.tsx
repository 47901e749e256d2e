'use client'

import { TextInput } from '@/app/ui/primitives/text-input'
import type { ZoneGroup } from '@/lib/domain/list-zones'
import type { FormAnswer } from '../../forms/action-form'
import { ZoneSelect } from '../../forms/zone-select'
import { FormField } from '../../forms/form-field'

interface ContactFieldsProps {
  answer: FormAnswer
  zones: readonly ZoneGroup[]
  begun?: { contactName: string; address: string; zone: string }
}

/** Who is written to, where, and in which time. */
export function ContactFields({ answer, zones, begun }: ContactFieldsProps) {
  return (
    <div className="grid gap-4 sm:grid-cols-3">
      <FormField answer={answer} name="contactName" label="Contact">
        {(wiring) => (
          <TextInput
            {...wiring}
            autoComplete="off"
            defaultValue={answer.valueOf('contactName', begun?.contactName)}
          />
        )}
      </FormField>
      <FormField answer={answer} name="address" label="Mail address">
        {(wiring) => (
          <TextInput
            {...wiring}
            type="email"
            autoComplete="off"
            defaultValue={answer.valueOf('address', begun?.address)}
          />
        )}
      </FormField>
      <FormField answer={answer} name="zone" label="Its time zone">
        {(wiring) => (
          <ZoneSelect wiring={wiring} zones={zones} defaultValue={answer.valueOf('zone', begun?.zone)} />
        )}
      </FormField>
    </div>
  )
}
