import type { Metadata } from 'next'
import { headers } from 'next/headers'
import Link from 'next/link'
import { MarginNote } from '@/app/ui/layout/margin'
import { PageShell } from '@/app/ui/layout/page-shell'
import { TopBar } from '@/app/ui/layout/top-bar'
import { readJourney } from '@/lib/auth/journey-cookies'
import { paths } from '@/lib/web/paths'
import { CodeForm } from './code-form'

export const metadata: Metadata = { title: 'Look into your mail' }

export default async function SignInCode({
  searchParams,
}: {
  searchParams: Promise<Record<string, string | string[] | undefined>>
}) {
  const { problem } = await searchParams
  const { address } = readJourney(await headers())

  return (
    <PageShell
      top={<TopBar />}
      title="Look into your mail"
      lead="If the address you gave is known here, a mail is on its way to it. Open its link, or type its code."
      margin={<Notes />}
    >
      <CodeForm address={address ?? ''} problem={typeof problem === 'string' ? problem : null} />
    </PageShell>
  )
}

function Notes() {
  return (
    <>
      <MarginNote title="How long it serves">
        <p>Link and code serve once, within 10 minutes. A later mail takes the place of an earlier one.</p>
      </MarginNote>
      <MarginNote title="No mail?">
        <p>
          Look among unwanted mail, and see that the address is the one your invitation came to.{' '}
          <Link href={paths.signIn()}>Ask again</Link>; at most five mails an hour go to one address.
        </p>
      </MarginNote>
    </>
  )
}
