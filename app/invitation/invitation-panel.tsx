'use client'

import { useActionState, useEffect, useState, useSyncExternalStore } from 'react'
import { ButtonLink } from '@/app/ui/primitives/button'
import { Notice } from '@/app/ui/primitives/notice'
import { paths } from '@/lib/web/paths'
import { InvitationFound } from './invitation-found'
import type { InvitationState } from './invitation-state'
import { LinkForm } from './link-form'
import { readLink } from './read-link'

interface InvitationPanelProps {
  action: (previous: InvitationState, form: FormData) => Promise<InvitationState>
}

const asking: InvitationState = { step: 'asking' }

/** The page of an invitation: reads the link of its own address, or has it pasted where scripts do not run. */
export function InvitationPanel({ action }: InvitationPanelProps) {
  const [answered, formAction] = useActionState(action, asking)
  const token = useSyncExternalStore(onHashChange, readHash, () => null)
  const [found, setFound] = useState<InvitationState>(asking)
  useEffect(() => {
    let isWanted = true
    if (token) void readLink(token).then((state) => isWanted && setFound(state))
    return () => {
      isWanted = false
    }
  }, [token])
  const state = answered.step === 'asking' && !answered.error ? found : answered
  const isReading = Boolean(token) && state.step === 'asking' && !state.error

  return (
    <div className="flex max-w-text flex-col gap-6" aria-busy={isReading || undefined}>
      {state.step === 'asking' && (
        <>
          {isReading ? (
            <p role="status">Reading the invitation…</p>
          ) : (
            <LinkForm action={formAction} error={state.error} />
          )}
        </>
      )}
      {state.step === 'read' && <InvitationFound state={state} action={formAction} />}
      {state.step === 'done' && (
        <>
          <Notice tone="done" title={state.title} isLive>
            <p>{state.words}</p>
          </Notice>
          {state.leadsToSignIn && (
            <p>
              <ButtonLink href={paths.signIn()}>Ask for another sign-in link</ButtonLink>
            </p>
          )}
        </>
      )}
    </div>
  )
}

function onHashChange(listener: () => void): () => void {
  window.addEventListener('hashchange', listener)
  return () => window.removeEventListener('hashchange', listener)
}

function readHash(): string | null {
  return window.location.hash.slice(1) || null
}
