import type { ReactNode } from 'react'
import { withinSentence } from '@/app/ui/primitives/within-sentence'
import { counted } from '@/lib/domain/plural'
import type { ParticipationView } from '@/lib/use-cases/returns/read-participation'

/** The study as the laboratory needs to know it: the method, the materials, how often, with which digits. */
export function WhatIsAsked({ view: { study, layout, places } }: { view: ParticipationView }) {
  return (
    <dl className="grid max-w-text grid-cols-[9rem_minmax(0,1fr)] gap-x-5 gap-y-2 max-sm:grid-cols-1 max-sm:gap-y-0.5">
      <Item name="Test method">{study.method}</Item>
      {study.purpose && <Item name="Purpose">{study.purpose}</Item>}
      <Item name={layout.measurands.length === 1 ? 'Measurand' : 'Measurands'}>
        {layout.measurands
          .map(({ name, unit, decimals }) => `${name}${unit ? ` in ${unit}` : ''}, ${sayDecimals(decimals)}`)
          .join('; ')}
      </Item>
      <Item name={layout.materials.length === 1 ? 'Material' : 'Materials'}>
        {layout.materials.map(({ name }) => name).join(', ')}
      </Item>
      <Item name="Of each material">
        {layout.levels.map(({ name, count }) => counted(count, withinSentence(name))).join(', each with ')}
      </Item>
      <Item name="In all">{places === 1 ? 'one result' : `${places} results`}</Item>
    </dl>
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

function sayDecimals(decimals: number): string {
  if (decimals === 0) return 'whole numbers'
  return decimals === 1 ? 'one decimal' : `${decimals} decimals`
}
