'use client'

import Link from 'next/link'
import { Fieldset } from '@/app/ui/primitives/fieldset'
import type { ZoneGroup } from '@/lib/domain/list-zones'
import { paths } from '@/lib/web/paths'
import { ActionForm } from '../../forms/action-form'
import { correctInvitationAction } from './actions'
import { ContactFields } from './contact-fields'

interface CorrectFormProps {
  studyId: string
  invitation: { invitationId: string; laboratory: string; contactName: string; address: string; zone: string }
  zones: readonly ZoneGroup[]
  isOpen: boolean
}

/** Whom an unanswered invitation is for. */
export function CorrectForm({ studyId, invitation, zones, isOpen }: CorrectFormProps) {
  return (
    <div className="border bg-sheet p-4">
      <ActionForm
        scope="correct"
        action={correctInvitationAction}
        hidden={{ studyId, invitationId: invitation.invitationId }}
        submit={isOpen ? 'Correct and send a new link' : 'Correct the contact'}
        pendingLabel="Correcting…"
        besides={() => (
          <Link href={paths.station(studyId, 'laboratories')} className="prose-link inline-block min-h-6">
            Leave it as it is
          </Link>
        )}
      >
        {(answer) => (
          <Fieldset
            name="correct"
            legend={`The contact of ${invitation.laboratory}`}
            hint={
              isOpen
                ? 'The new link goes to this address at once; the one sent before stops working.'
                : undefined
            }
          >
            <ContactFields answer={answer} zones={zones} begun={invitation} />
          </Fieldset>
        )}
      </ActionForm>
    </div>
  )
}
