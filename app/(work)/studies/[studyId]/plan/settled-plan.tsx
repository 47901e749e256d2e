import type { ReactNode } from 'react'
import { Section } from '@/app/ui/layout/section'
import { Time } from '@/app/ui/primitives/time'
import { showTime } from '@/lib/domain/show-time'
import { countPlaces } from '@/lib/domain/study-plan'
import type { StudyView } from '@/lib/use-cases/studies/read-study'
import { AskedTable } from '../asked-table'

/** A plan that stands, laid out to be read and printed. */
export function SettledPlan({ study, layout }: Pick<StudyView, 'study' | 'layout'>) {
  const due = showTime(study.deadline.dueAt, study.deadline.zone)
  return (
    <>
      <dl className="grid max-w-text gap-x-6 gap-y-2 sm:grid-cols-[10rem_minmax(0,1fr)]">
        <Fact name="Short name">{study.shortName}</Fact>
        <Fact name="Test method">{study.method}</Fact>
        {study.purpose && <Fact name="Purpose">{study.purpose}</Fact>}
        <Fact name="Run by">{study.organisation}</Fact>
        <Fact name="Deadline">
          <Time at={due.iso} text={due.text} zone={due.zoneText} />
        </Fact>
        <Fact name="Factor of the limits">{study.limitFactor === '2.8' ? '2.8' : '1.96·√2'}</Fact>
        <Fact name="Asked of each laboratory">{countPlaces(layout)} results</Fact>
      </dl>
      <Section title="What is asked">
        <AskedTable layout={layout} />
      </Section>
    </>
  )
}

function Fact({ name, children }: { name: string; children: ReactNode }) {
  return (
    <>
      <dt className="text-ink-soft">{name}</dt>
      <dd className="max-sm:mb-2">{children}</dd>
    </>
  )
}
