import type { ReactNode } from 'react'
import { Time } from '@/app/ui/primitives/time'
import type { InvitationView } from '@/lib/use-cases/laboratories/read-invitation'

type KnownInvitation = Exclude<InvitationView, { state: 'unknown' }>

/** Who asks, for what, until when. It names no laboratory and nothing a laboratory has stored. */
export function AskedStudy({ view: { study, asked, deadline } }: { view: KnownInvitation }) {
  return (
    <div>
      <h2 className="font-heading text-title font-bold">
        {study.shortName}: {study.title}
      </h2>
      <dl className="mt-3 grid grid-cols-[8rem_minmax(0,1fr)] gap-x-5 gap-y-2 max-sm:grid-cols-1 max-sm:gap-y-0.5">
        <Item name="Asked by">{study.organisation}</Item>
        <Item name="Test method">{study.method}</Item>
        {study.purpose && <Item name="Purpose">{study.purpose}</Item>}
        <Item name="To measure">
          {asked.measurands.join(', ')} of{' '}
          {asked.materials === 1 ? 'one material' : `${asked.materials} materials`}:{' '}
          {asked.results === 1 ? 'one result' : `${asked.results} results`} in all
        </Item>
        <Item name="Until">
          <Time at={deadline.iso} text={deadline.text} /> in {deadline.zoneText}
        </Item>
      </dl>
      <p className="mt-4 text-small text-ink-soft">
        Results are shown under a code, never under a name. Whoever accepts gets that code after signing in.
      </p>
    </div>
  )
}

function Item({ name, children }: { name: string; children: ReactNode }) {
  return (
    <>
      <dt className="text-ink-soft">{name}</dt>
      <dd className="max-sm:mb-2">{children}</dd>
    </>
  )
}
