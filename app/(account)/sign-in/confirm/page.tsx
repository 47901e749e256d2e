import type { Metadata } from 'next'
import { PageShell } from '@/app/ui/layout/page-shell'
import { TopBar } from '@/app/ui/layout/top-bar'
import { ConfirmForm } from './confirm-form'

export const metadata: Metadata = { title: 'Sign in' }

/** Where the mailed link leads. Opening it changes nothing: programs that look at mail open links too. */
export default function ConfirmSignIn() {
  return (
    <PageShell top={<TopBar />} title="One press and you are in">
      <ConfirmForm />
    </PageShell>
  )
}
