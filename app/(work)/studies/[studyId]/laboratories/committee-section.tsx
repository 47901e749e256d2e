import { Section } from '@/app/ui/layout/section'
import { Confirm } from '@/app/ui/primitives/confirm'
import { DataTable } from '@/app/ui/primitives/data-table'
import { EmptyState } from '@/app/ui/primitives/empty-state'
import type { readCommittee } from '@/lib/use-cases/committee/appoint-committee-member'
import { PressForm } from '../../forms/press-form'
import { dismissAction } from './actions'
import { AppointForm } from './appoint-form'
import { RoleForm } from './role-form'

type Committee = Awaited<ReturnType<typeof readCommittee>>

/** Who reads the coded results before they are published. */
export function CommitteeSection({ study, members }: Committee) {
  const { studyId } = study
  return (
    <Section
      title="Committee"
      id="committee"
      note="It reads codes, never names. Its chair can confirm a publication."
    >
      <div className="flex flex-col gap-4">
        <DataTable
          caption="Members of the committee"
          isCaptionHidden
          rows={members}
          rowKey={({ personId }) => personId}
          empty={
            <EmptyState title="Nobody is appointed yet">
              Name those who read the results by code before anything is published.
            </EmptyState>
          }
          columns={[
            { key: 'name', header: 'Name', isRowHeader: true, cell: ({ name }) => name },
            { key: 'address', header: 'Address', cell: ({ address }) => address },
            { key: 'role', header: 'Role', cell: (member) => <RoleForm studyId={studyId} member={member} /> },
            {
              key: 'action',
              header: <span className="sr-only">Actions</span>,
              kind: 'action',
              cell: ({ personId, name }) => (
                <div className="py-1 text-left" data-screen-only>
                  <Confirm
                    label="Dismiss"
                    consequence={<p className="whitespace-normal">{name} can no longer open the study.</p>}
                  >
                    <PressForm
                      action={dismissAction}
                      hidden={{ studyId, personId }}
                      variant="destructive"
                      pendingLabel="Dismissing…"
                    >
                      Dismiss {name}
                    </PressForm>
                  </Confirm>
                </div>
              ),
            },
          ]}
        />
        <AppointForm studyId={studyId} />
      </div>
    </Section>
  )
}
