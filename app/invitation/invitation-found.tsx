import type { ReactNode } from 'react'
import { ButtonLink } from '@/app/ui/primitives/button'
import { Confirm } from '@/app/ui/primitives/confirm'
import { Notice } from '@/app/ui/primitives/notice'
import { SubmitButton } from '@/app/ui/primitives/submit-button'
import { paths } from '@/lib/web/paths'
import { AskedStudy } from './asked-study'
import type { InvitationState } from './invitation-state'

interface InvitationFoundProps {
  state: Extract<InvitationState, { step: 'read' }>
  action: (form: FormData) => void
}

/** An invitation by its state: what is asked, and what can be done about it now. */
export function InvitationFound({ state: { token, view, error }, action }: InvitationFoundProps) {
  if (view.state === 'unknown')
    return (
      <Notice tone="danger" title="This link is not known" isLive>
        <p>
          A mail program may have cut it at the end of a line. Open it from the mail again, or ask whoever
          invited you to send a new one.
        </p>
      </Notice>
    )
  return (
    <>
      {error && <Notice tone="warn" title={error} isLive />}
      {view.state !== 'open' && (
        <Notice tone={view.state === 'accepted' ? 'done' : 'info'} title={titles[view.state]}>
          {advice[view.state]}
        </Notice>
      )}
      <AskedStudy view={view} />
      {view.state === 'open' && (
        <div className="flex flex-wrap items-start gap-3">
          <StepForm token={token} step="accepted" action={action}>
            <SubmitButton pendingLabel="Accepting…" className="px-6">
              Accept
            </SubmitButton>
          </StepForm>
          <Confirm
            label="Decline"
            variant="plain"
            consequence={<p>The coordinator sees it at once, and this link cannot take it back.</p>}
          >
            <StepForm token={token} step="declined" action={action}>
              <SubmitButton variant="destructive" pendingLabel="Declining…">
                Decline for good
              </SubmitButton>
            </StepForm>
          </Confirm>
        </div>
      )}
      {view.state === 'superseded' && (
        <StepForm token={token} step="renew" action={action}>
          <SubmitButton variant="plain" pendingLabel="Sending…">
            Send a new link to the invited address
          </SubmitButton>
        </StepForm>
      )}
      {view.state === 'accepted' && (
        <p>
          <ButtonLink variant="primary" href={paths.signIn()}>
            Sign in
          </ButtonLink>
        </p>
      )}
    </>
  )
}

const titles = {
  accepted: 'This invitation has been accepted',
  declined: 'This invitation has been declined',
  superseded: 'A newer link has taken the place of this one',
  closed: 'The deadline has passed, and the invitation can no longer be answered',
} as const

const advice = {
  accepted: 'To enter results, sign in with the address the invitation was mailed to.',
  declined: 'Nothing more is asked of you. If it was declined by mistake, write to whoever invited you.',
  superseded: 'Use the link of the latest mail. If you cannot find it, have one more sent.',
  closed: 'If your laboratory would still take part, write to whoever invited you.',
} as const

interface StepFormProps {
  token: string
  step: 'accepted' | 'declined' | 'renew'
  action: (form: FormData) => void
  children: ReactNode
}

function StepForm({ token, step, action, children }: StepFormProps) {
  return (
    <form action={action}>
      <input type="hidden" name="link" value={token} />
      <input type="hidden" name="step" value={step} />
      {children}
    </form>
  )
}
