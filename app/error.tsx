'use client'

import Link from 'next/link'
import { Button, ButtonLink } from './ui/primitives/button'
import { Mark } from './ui/layout/mark'

interface ErrorPageProps {
  error: Error & { digest?: string }
  reset: () => void
}

/** A defect of ours. Its own words stay on the server; the reference finds them in the log. */
export default function ErrorPage({ error, reset }: ErrorPageProps) {
  return (
    <>
      <header className="border-b bg-sheet px-4 py-2.5 sm:px-6 lg:px-10">
        <Link href="/" className="flex min-h-9 items-center gap-2.5 font-heading text-title font-bold">
          <Mark />
          Evenlot
        </Link>
      </header>
      <main id="content" tabIndex={-1} className="flex flex-col items-start gap-5 px-4 py-8 sm:px-6 lg:px-10">
        <h1 className="font-heading text-page font-bold">This page failed, and it is our fault</h1>
        <p className="max-w-text">
          What you had sent before is kept. Try once more; if it fails again, tell whoever runs this service
          {error.digest ? ' and give the reference below.' : '.'}
        </p>
        {error.digest && (
          <p>
            Reference <span className="font-mono font-semibold">{error.digest}</span>
          </p>
        )}
        <div className="flex flex-wrap gap-2">
          <Button variant="primary" onClick={reset}>
            Try once more
          </Button>
          <ButtonLink href="/">Go to the front page</ButtonLink>
        </div>
      </main>
    </>
  )
}
