import { Section } from '@/app/ui/layout/section'
import type { ZoneGroup } from '@/lib/domain/list-zones'
import type { LaboratoriesView } from '@/lib/use-cases/laboratories/read-laboratories'
import { InviteForm } from './invite-form'
import { PasteForm } from './paste-form'

/** One laboratory by a form, or many by a pasted list. */
export function InviteSection({
  study,
  zones,
}: {
  study: LaboratoriesView['study']
  zones: readonly ZoneGroup[]
}) {
  const isOpen = study.state === 'open'
  return (
    <Section
      id="invite"
      title={isOpen ? 'Invite another laboratory' : 'Name a laboratory'}
      note={isOpen ? 'Its invitation is sent at once.' : 'Nothing is sent until you send the invitations.'}
    >
      <div className="flex flex-col gap-4">
        <div className="border bg-sheet p-4">
          <InviteForm studyId={study.studyId} zones={zones} isOpen={isOpen} />
        </div>
        <PasteForm studyId={study.studyId} isOpen={isOpen} />
      </div>
    </Section>
  )
}
