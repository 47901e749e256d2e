import type { InvitationView } from '@/lib/use-cases/laboratories/read-invitation'
import type { InvitationState } from './invitation-state'

/** Asks what stands behind a link, by a request that changes nothing. */
export async function readLink(token: string): Promise<InvitationState> {
  try {
    const response = await fetch('/api/invitations/read', {
      method: 'POST',
      headers: { 'Content-Type': 'application/json' },
      body: JSON.stringify({ token }),
    })
    if (response.status === 400) return { step: 'read', token, view: { state: 'unknown' } }
    if (response.ok) return { step: 'read', token, view: (await response.json()) as InvitationView }
  } catch {
    // Said below, with every other way of not getting an answer.
  }
  return {
    step: 'asking',
    error: 'The invitation could not be read just now. Load the page again, or paste the link here.',
  }
}
