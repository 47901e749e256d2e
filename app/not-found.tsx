import type { Metadata } from 'next'
import { PageShell } from './ui/layout/page-shell'
import { TopBar } from './ui/layout/top-bar'
import { ButtonLink } from './ui/primitives/button'

export const metadata: Metadata = { title: 'Nothing here' }

// It says the same whether the page never was or is not this person's to see.
export default function NotFound() {
  return (
    <PageShell top={<TopBar />} kicker="404" title="Nothing here for you">
      <p className="max-w-text">
        Either no page has this address, or it belongs to people you are not signed in as. If a mail brought
        you here, open its link again; it may have been cut at the end of a line.
      </p>
      <p>
        <ButtonLink href="/">Go to the front page</ButtonLink>
      </p>
    </PageShell>
  )
}
