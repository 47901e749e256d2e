import type { InvitationView } from '@/lib/use-cases/laboratories/read-invitation'

/** What the page of an invitation shows: what was read of a link, or what has just been done with it. */
export type InvitationState =
  | { step: 'asking'; error?: string }
  | { step: 'read'; token: string; view: InvitationView; error?: string }
  | { step: 'done'; title: string; words: string; leadsToSignIn: boolean }
