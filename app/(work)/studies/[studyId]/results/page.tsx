import type { Metadata } from 'next'
import { MarginNote } from '@/app/ui/layout/margin'
import { Section } from '@/app/ui/layout/section'
import { DownloadLink } from '@/app/ui/primitives/download-link'
import { Notice } from '@/app/ui/primitives/notice'
import { toReturnsAnswer } from '@/app/api/studies/[studyId]/returns/to-returns-answer'
import { readLanesWish } from '@/lib/domain/arrange-lanes'
import { listZones } from '@/lib/domain/list-zones'
import { showDistance, showTime } from '@/lib/domain/show-time'
import { watchReturns } from '@/lib/use-cases/returns/watch-returns'
import { LiveLanes } from '../live-lanes'
import { loadStudy } from '../load-study'
import { StudyFrame } from '../study-frame'
import { CloseSection } from './close-section'
import { ExtensionSection } from './extension-section'
import { LanesFilter, sortAddresses } from './lanes-filter'
import { RemarksSection } from './remarks-section'
import { ReopenSection } from './reopen-section'
import { doneWords } from './done-words'

export const metadata: Metadata = { title: 'Results' }

interface ResultsPageProps {
  params: Promise<{ studyId: string }>
  searchParams: Promise<Record<string, string | string[] | undefined>>
}

export default async function ResultsPage({ params, searchParams }: ResultsPageProps) {
  const { studyId } = await params
  const query = await searchParams
  const { actor, context, view } = await loadStudy(studyId)
  const returns = await watchReturns(context, { studyId })
  const { study, lanes, now } = returns
  const wish = readLanesWish(query)
  const due = showTime(study.deadline.dueAt, study.deadline.zone)
  const said = doneWords(query)

  return (
    <StudyFrame
      view={view}
      actor={actor}
      station="results"
      title="Results"
      lead={`Deadline ${due.text} in ${due.zoneText}, ${showDistance(now, study.deadline.dueAt)}.`}
      margin={
        <>
          <MarginNote title="How lateness is told">
            <p>
              By the server’s clock against the deadline, or against the later one a laboratory was given.
            </p>
          </MarginNote>
          <MarginNote title="Values">
            <p>
              What the last return holds; before the first return, what stands in the draft. A place left
              empty on purpose counts as without a value.
            </p>
          </MarginNote>
          <MarginNote title="Times">
            <p>
              All in {due.zoneText}. A laboratory&apos;s own zone is not shown beside its code, since it could
              tell which it is.
            </p>
          </MarginNote>
        </>
      }
    >
      {said && <Notice tone="done" title={said} isLive />}
      <Section
        title="Laboratory by laboratory"
        actions={
          lanes.length > 0 && (
            <DownloadLink href={`/api/studies/${studyId}/returns/csv`} format="CSV">
              Save this table
            </DownloadLink>
          )
        }
      >
        <div className="flex flex-col gap-3">
          {lanes.length > 0 && <LanesFilter studyId={studyId} wish={wish} lanes={lanes} />}
          <LiveLanes
            studyId={studyId}
            initial={toReturnsAnswer(returns)}
            wish={wish}
            sorts={sortAddresses(studyId, wish)}
            isOpen={study.state === 'open'}
          />
        </div>
      </Section>
      {study.state === 'open' && (
        <ExtensionSection study={study} lanes={lanes} chosen={[query.extend].flat()[0]} />
      )}
      <RemarksSection lanes={lanes} />
      {study.state === 'open' && <CloseSection returns={returns} />}
      {study.state === 'closed' && <ReopenSection study={study} zones={listZones()} />}
    </StudyFrame>
  )
}
