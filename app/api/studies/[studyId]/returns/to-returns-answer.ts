import type { ReturnsView } from '@/lib/use-cases/returns/watch-returns'
import type { ReturnsAnswer } from './schema'

/** The same snapshot for the page drawn on the server and for the programs that ask for it. */
export function toReturnsAnswer({ study, now, places, returned, late, lanes }: ReturnsView): ReturnsAnswer {
  return {
    now: now.toISOString(),
    dueAt: study.deadline.dueAt.toISOString(),
    zone: study.deadline.zone,
    places,
    returned,
    late,
    // Named one by one: a laboratory's own zone and its remark stay on the server.
    lanes: lanes.map((lane) => ({
      code: lane.code,
      state: lane.state,
      acceptedAt: lane.acceptedAt?.toISOString() ?? null,
      draftSavedAt: lane.draftSavedAt?.toISOString() ?? null,
      draftEntries: lane.draftEntries,
      returnedAt: lane.returnedAt?.toISOString() ?? null,
      returns: lane.returns,
      results: lane.results,
      extendedTo: lane.extendedTo?.toISOString() ?? null,
      asksForTime: lane.request !== null,
    })),
  }
}
