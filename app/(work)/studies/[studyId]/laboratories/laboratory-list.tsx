import Link from 'next/link'
import { DataTable, type Column } from '@/app/ui/primitives/data-table'
import { EmptyState } from '@/app/ui/primitives/empty-state'
import { Status } from '@/app/ui/primitives/status'
import type { ZoneGroup } from '@/lib/domain/list-zones'
import { showDay } from '@/lib/domain/show-time'
import type { LaboratoriesView } from '@/lib/use-cases/laboratories/read-laboratories'
import { paths } from '@/lib/web/paths'
import { sendAgainAction } from './actions'
import { CorrectForm } from './correct-form'
import { PressForm } from '../../forms/press-form'

type Invitation = LaboratoriesView['invitations'][number]

interface LaboratoryListProps {
  study: LaboratoriesView['study']
  invitations: readonly Invitation[]
  /** The invitation being corrected, from the address of the page. */
  correcting: string | undefined
  zones: readonly ZoneGroup[]
}

export function LaboratoryList({ study, invitations, correcting, zones }: LaboratoryListProps) {
  const open = invitations.find(({ invitationId, answer }) => invitationId === correcting && !answer)
  return (
    <div className="flex flex-col gap-4">
      {open && (
        <CorrectForm
          studyId={study.studyId}
          invitation={open}
          zones={zones}
          isOpen={study.state === 'open'}
        />
      )}
      <DataTable
        caption="Invited laboratories"
        isCaptionHidden
        rows={invitations}
        rowKey={({ invitationId }) => invitationId}
        isMarked={({ invitationId }) => invitationId === open?.invitationId}
        columns={columns(study)}
        empty={
          <EmptyState title="No laboratory is named yet">
            Name them one by one or paste a list below. Nothing is sent until you say so.
          </EmptyState>
        }
      />
    </div>
  )
}

function columns({ studyId, state, deadline }: LaboratoriesView['study']): Column<Invitation>[] {
  const mayChange = state === 'draft' || state === 'open'
  return [
    {
      key: 'laboratory',
      header: 'Laboratory',
      isRowHeader: true,
      cell: ({ laboratory, city, country }) => (
        <>
          <span className="font-semibold">{laboratory}</span>
          <span className="block text-ink-soft">{[city, country].filter(Boolean).join(', ')}</span>
        </>
      ),
    },
    {
      key: 'contact',
      header: 'Contact',
      cell: ({ contactName, address }) => (
        <>
          {contactName}
          <span className="block text-ink-soft">{address}</span>
        </>
      ),
    },
    { key: 'zone', header: 'Its time', cell: ({ zone }) => zone.split('/').at(-1)?.replaceAll('_', ' ') },
    { key: 'answer', header: 'Answer', cell: ({ answer }) => <Answer answer={answer} state={state} /> },
    {
      key: 'mail',
      header: 'Invitation',
      cell: (invitation) => <MailWords invitation={invitation} zone={deadline.zone} />,
    },
    {
      key: 'action',
      header: <span className="sr-only">Actions</span>,
      kind: 'action',
      cell: ({ invitationId, laboratory, answer }) =>
        mayChange &&
        !answer && (
          <div className="flex items-center justify-end gap-4 py-1" data-screen-only>
            <Link
              href={`${paths.station(studyId, 'laboratories')}?correct=${invitationId}`}
              className="prose-link inline-flex min-h-6 items-center"
            >
              Correct <span className="sr-only">the contact of {laboratory}</span>
            </Link>
            {state === 'open' && (
              <PressForm action={sendAgainAction} hidden={{ studyId, invitationId }} pendingLabel="Sending…">
                Send again <span className="sr-only">to {laboratory}</span>
              </PressForm>
            )}
          </div>
        ),
    },
  ]
}

function Answer({
  answer,
  state,
}: {
  answer: Invitation['answer']
  state: LaboratoriesView['study']['state']
}) {
  if (answer === 'accepted') return <Status tone="done">accepted</Status>
  if (answer === 'declined') return <Status tone="info">declined</Status>
  return (
    <Status tone="quiet">
      <span className="whitespace-nowrap">{state === 'draft' ? 'not asked yet' : 'no answer yet'}</span>
    </Status>
  )
}

/** The mail that carried the latest link, and what the server of the address said of it. */
function MailWords({ invitation: { mail, lastLink }, zone }: { invitation: Invitation; zone: string }) {
  if (!lastLink) return <span className="text-ink-soft">not sent</span>
  const day = showDay(mail?.queuedAt ?? lastLink.issuedAt, zone)
  const again = lastLink.number > 1 ? `, link ${lastLink.number}` : ''
  switch (mail?.outcome) {
    case 'sent':
      return <Status tone="done">{`sent ${day}${again}`}</Status>
    case 'refused':
      return (
        <>
          <Status tone="danger">{`refused${again}`}</Status>
          {mail.detail && <span className="block max-w-64 text-ink-soft">{mail.detail}</span>}
        </>
      )
    case 'deferred':
      return <Status tone="warn">{`not taken yet, tried again${again}`}</Status>
    case 'dropped':
      return <Status tone="quiet">{`not sent${again}`}</Status>
    default:
      return <Status tone="going">{`waiting to be sent${again}`}</Status>
  }
}
