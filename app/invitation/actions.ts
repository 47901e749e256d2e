'use server'

import { headers } from 'next/headers'
import { z } from 'zod'
import { requestSignInLink } from '@/lib/auth/request-link'
import { NotFound, Refusal } from '@/lib/domain/errors'
import { answerInvitation } from '@/lib/use-cases/laboratories/answer-invitation'
import { readInvitation } from '@/lib/use-cases/laboratories/read-invitation'
import { requestNewLink } from '@/lib/use-cases/laboratories/request-new-link'
import { isForeignRequest } from '@/lib/web/foreign-request'
import { ForeignRequest } from '@/lib/web/foreign-request-error'
import { readPeer } from '@/lib/web/peer-address'
import { anonymousContext } from '@/lib/web/request-context'
import { parts } from '@/lib/wiring'
import type { InvitationState } from './invitation-state'

const input = z.object({
  /** The link as mailed, or only what follows its #. */
  link: z
    .string()
    .max(1000)
    .transform((link) => link.trim().split('#').at(-1) ?? ''),
  step: z.enum(['read', 'accepted', 'declined', 'renew']),
})

/** Everything the page of an invitation can be asked. Only a POST changes anything: a mail scanner opens, it does not press. */
export async function invitationAction(_previous: InvitationState, form: FormData): Promise<InvitationState> {
  if (isForeignRequest({ method: 'POST', headers: await headers() }, parts().config.baseUrl))
    throw new ForeignRequest()
  const parsed = input.safeParse({ link: form.get('link'), step: form.get('step') })
  if (!parsed.success) return { step: 'asking', error: 'Paste the link from the mail.' }
  const { link: token, step } = parsed.data
  const view = await readInvitation(anonymousContext(), { token })
  if (view.state === 'unknown' || step === 'read') return { step: 'read', token, view }
  try {
    if (step === 'renew') return await renew(token)
    return step === 'accepted' ? await accept(token) : await decline(token)
  } catch (error) {
    if (error instanceof NotFound) return { step: 'read', token, view: { state: 'unknown' } }
    if (!(error instanceof Refusal)) throw error
    return {
      step: 'read',
      token,
      view: await readInvitation(anonymousContext(), { token }),
      error: error.publicMessage,
    }
  }
}

async function accept(token: string): Promise<InvitationState> {
  const { address } = await answerInvitation(anonymousContext(), { token, answer: 'accepted' })
  const { trustedProxies } = parts().config
  try {
    await requestSignInLink(parts(), { address, peer: readPeer(await headers(), trustedProxies) })
  } catch (error) {
    // The answer stands whatever becomes of the mail; a link can be asked for on the sign-in page.
    if (!(error instanceof Refusal)) throw error
    return {
      step: 'done',
      title: 'Accepted',
      words: 'Sign in with the address the invitation was mailed to.',
      leadsToSignIn: true,
    }
  }
  return {
    step: 'done',
    title: 'Accepted. A sign-in link is on its way to the invited address',
    words:
      'Only that address can sign in and return results. The link in the mail works once; you can always ask for another.',
    leadsToSignIn: true,
  }
}

async function decline(token: string): Promise<InvitationState> {
  await answerInvitation(anonymousContext(), { token, answer: 'declined' })
  return {
    step: 'done',
    title: 'Declined',
    words: 'The coordinator sees it in the study. Nothing more is asked of you.',
    leadsToSignIn: false,
  }
}

async function renew(token: string): Promise<InvitationState> {
  await requestNewLink(anonymousContext(), { token })
  return {
    step: 'done',
    title: 'A new link is on its way to the invited address',
    words: 'It takes the place of this one. Look for the latest mail.',
    leadsToSignIn: false,
  }
}
