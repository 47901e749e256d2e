'use client'

import Link from 'next/link'
import { useSyncExternalStore } from 'react'
import { Button } from '@/app/ui/primitives/button'
import { Notice } from '@/app/ui/primitives/notice'
import { paths } from '@/lib/web/paths'

/** The link carries its secret after "#", which stays in the browser; here it becomes the form that is sent. */
export function ConfirmForm() {
  const fragment = useSyncExternalStore(subscribe, readFragment, () => null)
  if (fragment === null) return <WithoutScripts />
  const carried = new URLSearchParams(fragment)
  const token = carried.get('token')
  const address = carried.get('address')
  if (!token || !address) return <CutLink />

  return (
    <form method="post" action="/api/sign-in" className="flex max-w-text flex-col items-start gap-5">
      <input type="hidden" name="token" value={token} />
      <input type="hidden" name="address" value={address} />
      <p>
        You sign in as <strong className="[overflow-wrap:anywhere]">{address}</strong>. If this is not you,
        close the page.
      </p>
      <Button type="submit" variant="primary">
        Sign in
      </Button>
    </form>
  )
}

function subscribe(changed: () => void): () => void {
  window.addEventListener('hashchange', changed)
  return () => window.removeEventListener('hashchange', changed)
}

function readFragment(): string {
  return window.location.hash.slice(1)
}

function WithoutScripts() {
  return (
    <noscript>
      <p className="max-w-text">
        This page needs scripts to read the link. Without them, <a href={paths.signInCode()}>type the code</a>{' '}
        from the same mail instead.
      </p>
    </noscript>
  )
}

function CutLink() {
  return (
    <Notice tone="warn" title="The link is not whole">
      Open it again from the mail, or <Link href={paths.signInCode()}>type the code</Link> that stands beside
      it.
    </Notice>
  )
}
