import { readClock } from '@/db/queries/clock'
import { listReturnProgress, type ReturnProgress } from '@/db/queries/returns'
import { findStudyFor, readLayout, type StudyRecord } from '@/db/queries/studies'
import type { Context } from '@/lib/context'
import { NotFound } from '@/lib/domain/errors'
import { authorise } from '@/lib/domain/permissions'
import { countPlaces } from '@/lib/domain/study-plan'

export type LaneState = 'returned' | 'in draft' | 'not begun' | 'late'

export interface ReturnsView {
  readonly study: StudyRecord
  readonly now: Date
  readonly places: number
  readonly returned: number
  readonly late: number
  readonly lanes: readonly (ReturnProgress & { state: LaneState })[]
}

/** Who has returned and who is late, by code alone. */
export async function watchReturns(context: Context, { studyId }: { studyId: string }): Promise<ReturnsView> {
  const study = await findStudyFor(context.db, context.actor, studyId)
  if (!study) throw new NotFound('study')
  authorise(context.actor, 'return.watch', study)
  const [now, layout, progress] = await Promise.all([
    readClock(context.db),
    readLayout(context.db, studyId),
    listReturnProgress(context.db, studyId),
  ])
  const lanes = progress.map((each) => ({
    ...each,
    state: laneState(each, { now, dueAt: study.deadline.dueAt }),
  }))
  return {
    study,
    now,
    places: countPlaces(layout),
    returned: lanes.filter(({ state }) => state === 'returned').length,
    late: lanes.filter(({ state }) => state === 'late').length,
    lanes,
  }
}

function laneState(lane: ReturnProgress, { now, dueAt }: { now: Date; dueAt: Date }): LaneState {
  if (lane.returns > 0) return 'returned'
  const due = lane.extendedTo && lane.extendedTo > dueAt ? lane.extendedTo : dueAt
  if (now > due) return 'late'
  return lane.draftEntries > 0 ? 'in draft' : 'not begun'
}
