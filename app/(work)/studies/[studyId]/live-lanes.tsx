'use client'

import { QueryClient, QueryClientProvider, useQuery } from '@tanstack/react-query'
import { useState } from 'react'
import type { Sort } from '@/app/ui/primitives/sortable-header'
import { returnsAnswer, type ReturnsAnswer } from '@/app/api/studies/[studyId]/returns/schema'
import type { LaneSort, LanesWish } from '@/lib/domain/arrange-lanes'
import { showTime } from '@/lib/domain/show-time'
import { LanesTable } from './lanes-table'

interface LiveLanesProps {
  studyId: string
  /** The snapshot of the server, drawn before any script runs. */
  initial: ReturnsAnswer
  wish: LanesWish
  sorts?: Readonly<Record<LaneSort, Sort>>
  /** Asked again only while results can still come in. */
  isOpen: boolean
}

/** The lanes, asked for again twice a minute while the page is looked at. */
export function LiveLanes(props: LiveLanesProps) {
  const [client] = useState(() => new QueryClient())
  return (
    <QueryClientProvider client={client}>
      <Lanes {...props} />
    </QueryClientProvider>
  )
}

function Lanes({ studyId, initial, wish, sorts, isOpen }: LiveLanesProps) {
  const { data, isError } = useQuery({
    queryKey: ['returns', studyId],
    queryFn: ({ signal }) => askForReturns(studyId, signal),
    initialData: initial,
    staleTime: 30_000,
    refetchInterval: isOpen ? 30_000 : false,
    retry: 1,
  })
  // A page drawn afresh on the server may know more than the last asking.
  const round = data.now > initial.now ? data : initial

  return (
    <div className="flex flex-col gap-2">
      <p role="status" className="text-small text-ink-soft">
        {`${round.returned} of ${round.lanes.length} returned${round.late > 0 ? `, ${round.late} late` : ''}.`}
      </p>
      <LanesTable round={round} wish={wish} sorts={sorts} />
      {isOpen && (
        <p className="text-small text-ink-soft">
          {isError ? 'The counts could not be asked for just now; they are those of ' : 'As of '}
          {showTime(round.now, round.zone).text}.
        </p>
      )}
    </div>
  )
}

async function askForReturns(studyId: string, signal: AbortSignal): Promise<ReturnsAnswer> {
  const response = await fetch(`/api/studies/${studyId}/returns`, {
    signal,
    headers: { Accept: 'application/json' },
  })
  if (!response.ok) throw new Error(`returns answered ${response.status}`)
  return returnsAnswer.parse(await response.json())
}
