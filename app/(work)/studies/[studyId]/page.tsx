import type { Metadata } from 'next'
import { MarginNote } from '@/app/ui/layout/margin'
import { Section } from '@/app/ui/layout/section'
import { toReturnsAnswer } from '@/app/api/studies/[studyId]/returns/to-returns-answer'
import { readLanesWish } from '@/lib/domain/arrange-lanes'
import { needsToday } from '@/lib/domain/needs-today'
import { showDistance, showTime } from '@/lib/domain/show-time'
import { describeState } from '@/lib/domain/study-states'
import { readLaboratories } from '@/lib/use-cases/laboratories/read-laboratories'
import { watchReturns } from '@/lib/use-cases/returns/watch-returns'
import { gatherNeeds } from './gather-needs'
import { LiveLanes } from './live-lanes'
import { loadStudy } from './load-study'
import { NeedsList } from './needs-list'
import { StudyFrame } from './study-frame'

export const metadata: Metadata = { title: 'What needs someone today' }

export default async function StudyPage({ params }: { params: Promise<{ studyId: string }> }) {
  const { studyId } = await params
  const { actor, context, view } = await loadStudy(studyId)
  const [returns, laboratories] = await Promise.all([
    watchReturns(context, { studyId }),
    readLaboratories(context, { studyId }),
  ])
  const { study, now } = view
  const { zone, dueAt } = study.deadline
  const due = showTime(dueAt, zone)
  const deadline = `Deadline ${due.text} in ${due.zoneText}, ${showDistance(now, dueAt)}.`

  return (
    <StudyFrame
      view={view}
      actor={actor}
      station={null}
      title={study.title}
      lead={`The study ${describeState(study.state)}.`}
      margin={
        <>
          <MarginNote title="What happens next">
            <p>{whatNext[study.state]}</p>
          </MarginNote>
          <MarginNote title="By code alone">
            <p>
              Here laboratories are codes. Which is which stands behind a button under Laboratories, and
              reading it is recorded.
            </p>
          </MarginNote>
        </>
      }
    >
      <Section title="Needs someone today">
        <NeedsList
          studyId={studyId}
          needs={needsToday(gatherNeeds({ view, returns, laboratories }))}
          quiet={study.state === 'published' ? 'The report is published and stays as it is.' : deadline}
        />
      </Section>
      {study.state !== 'draft' && (
        <Section
          title="The round, laboratory by laboratory"
          note={`${deadline} Each time below is in that zone.`}
        >
          <LiveLanes
            studyId={studyId}
            initial={toReturnsAnswer(returns)}
            wish={readLanesWish({})}
            isOpen={study.state === 'open'}
          />
        </Section>
      )}
    </StudyFrame>
  )
}

const whatNext = {
  draft: 'You name the laboratories and send the invitations; until then nobody is written to.',
  open: 'Laboratories return their results until the deadline, by the server’s clock. After it, a laboratory can still be given more time; then you close the study for returns.',
  closed:
    'You go through the scrutiny, have the statistics computed, and put the study before its committee.',
  'in-review': 'The committee reads by code. Then one person proposes publication and another confirms it.',
  published: 'Anyone can read the report. No laboratory is named in it.',
} as const
