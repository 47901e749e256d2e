'use client'

import { useActionState } from 'react'
import { SubmitButton } from '@/app/ui/primitives/submit-button'
import { Select } from '@/app/ui/primitives/select'
import type { CommitteeRole } from '@/lib/domain/actor'
import { committeeRoles } from '@/lib/domain/committee-roles'
import { untouchedForm } from '@/lib/web/form-state'
import { appointAction } from './actions'

interface RoleFormProps {
  studyId: string
  member: { personId: string; name: string; address: string; role: CommitteeRole }
}

/** A member's role; appointing the same address again in another role changes it. */
export function RoleForm({ studyId, member }: RoleFormProps) {
  const [state, formAction] = useActionState(appointAction, untouchedForm)
  return (
    <form action={formAction} className="flex items-center gap-2 py-1">
      <input type="hidden" name="studyId" value={studyId} />
      <input type="hidden" name="name" value={member.name} />
      <input type="hidden" name="address" value={member.address} />
      <Select
        key={member.role}
        name="role"
        aria-label={`Role of ${member.name}`}
        defaultValue={member.role}
        className="min-w-28"
        options={committeeRoles.map(({ value, label }) => ({ value, label: label.split(':')[0] ?? value }))}
      />
      <span data-screen-only>
        <SubmitButton variant="plain" pendingLabel="Changing…">
          Change <span className="sr-only">the role of {member.name}</span>
        </SubmitButton>
      </span>
      <span role="status" className="text-moss">
        {state.ok && 'changed'}
        {state.message}
      </span>
    </form>
  )
}
