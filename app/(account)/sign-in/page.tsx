import type { Metadata } from 'next'
import { redirect } from 'next/navigation'
import { MarginNote } from '@/app/ui/layout/margin'
import { PageShell } from '@/app/ui/layout/page-shell'
import { TopBar } from '@/app/ui/layout/top-bar'
import { Notice } from '@/app/ui/primitives/notice'
import { paths } from '@/lib/web/paths'
import { currentActor } from '@/lib/web/request-context'
import { safePath } from '@/lib/web/safe-path'
import { AddressForm } from './address-form'

export const metadata: Metadata = { title: 'Sign in' }

export default async function SignIn({
  searchParams,
}: {
  searchParams: Promise<Record<string, string | string[] | undefined>>
}) {
  const { next, problem, signed } = await searchParams
  const after = safePath(next, paths.studies())
  if (await currentActor()) redirect(after)

  return (
    <PageShell
      top={<TopBar />}
      title="Sign in"
      lead="Give your mail address. You get a link and a code; there is no password."
      margin={<Notes />}
    >
      {problem === 'link' && (
        <Notice tone="warn" title="This link does not sign you in any more" isLive>
          It was used already, or a later one took its place, or its 10 minutes are over. Ask for a new one
          below.
        </Notice>
      )}
      {signed === 'out' && <Notice tone="done" title="You are signed out of this browser" isLive />}
      <AddressForm next={after} />
    </PageShell>
  )
}

function Notes() {
  return (
    <MarginNote title="Which address">
      <p>The one to which your invitation came, or which your coordinator entered for you.</p>
      <p>Whether an address is known here is told to nobody, so this page says the same in every case.</p>
    </MarginNote>
  )
}
