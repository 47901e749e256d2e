import type { Metadata } from 'next'
import { PageShell } from '@/app/ui/layout/page-shell'
import { TopBar } from '@/app/ui/layout/top-bar'
import { invitationAction } from './actions'
import { InvitationPanel } from './invitation-panel'

export const metadata: Metadata = { title: 'Invitation', robots: { index: false } }

/** Opened by the link of a mail. What stands after the # never reaches the server by itself, nor any log. */
export default function InvitationPage() {
  return (
    <PageShell top={<TopBar />} title="Invitation to an interlaboratory study">
      <InvitationPanel action={invitationAction} />
    </PageShell>
  )
}
