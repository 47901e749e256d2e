import type { Kysely } from 'kysely'
import { findParticipation, type ParticipationRecord } from '@/db/queries/participations'
import { findStudyFor, type StudyRecord } from '@/db/queries/studies'
import type { DB } from '@/db/tables'
import type { Context } from '@/lib/context'
import { NotFound } from '@/lib/domain/errors'
import { authorise, type Action } from '@/lib/domain/permissions'

export interface OwnParticipation {
  readonly study: StudyRecord
  readonly participation: ParticipationRecord
  readonly role: string
}

/** The study and laboratory for which the actor acts. @throws {NotFound} when there is none. */
export async function ownParticipation(
  db: Kysely<DB>,
  { actor }: Pick<Context, 'actor'>,
  { studyId, action, lock }: { studyId: string; action: Action; lock?: 'share' },
): Promise<OwnParticipation> {
  const study = await findStudyFor(db, actor, studyId, { lock })
  const participation = study && (await findParticipation(db, { studyId, personId: actor.personId }))
  if (!study || !participation) throw new NotFound('study')
  const role = authorise(actor, action, { studyId, participantId: participation.participantId })
  return { study, participation, role }
}

/** Until when this laboratory may return: the study's deadline, or later by an extension of its own. */
export function ownDeadline({ study, participation }: OwnParticipation): Date {
  const { extendedTo } = participation
  return extendedTo && extendedTo > study.deadline.dueAt ? extendedTo : study.deadline.dueAt
}
